import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { clampFrame, createFrameTable, frameAtTime, frameDuration, middleOfFrame, nearestFrame, spreadFrames, timeOfFrame } from '~/marking/frames/frame-table'

/** Variable rate: 33, 17, 100, 33 ms apart. */
const table = createFrameTable([0, 33_367, 50_050, 150_150, 183_517])

const tables = fc.array(fc.integer({ min: 1, max: 200_000 }), { maxLength: 60 })
  .map(gaps => createFrameTable(gaps.reduce<number[]>((times, gap) => [...times, (times.at(-1) ?? 0) + gap], [0])))

describe('createFrameTable', () => {
  it('refuses an empty table and times that do not rise', () => {
    expect(() => createFrameTable([])).toThrow(RangeError)
    expect(() => createFrameTable([0, 10, 10])).toThrow(RangeError)
    expect(() => createFrameTable([0, Number.NaN])).toThrow(RangeError)
  })
})

describe('frameAtTime', () => {
  it('is the last frame shown at or before the moment', () => {
    expect([0, 33_366, 33_367, 149_000, 150_150, 9_000_000].map(time => frameAtTime(table, time))).toEqual([0, 0, 1, 2, 3, 4])
  })
  it('is the first frame before the beginning', () => {
    expect(frameAtTime(table, -5)).toBe(0)
  })
  it('finds every frame by its own time and by the middle of its time on the screen', () => {
    fc.assert(fc.property(tables, (any) => {
      any.timesUs.forEach((time, frame) => {
        expect(frameAtTime(any, time)).toBe(frame)
        expect(frameAtTime(any, middleOfFrame(any, frame))).toBe(frame)
        expect(nearestFrame(any, time)).toBe(frame)
      })
    }))
  })
})

describe('nearestFrame', () => {
  it('forgives a rounded time stamp', () => {
    expect(nearestFrame(table, 33_366)).toBe(1)
    expect(nearestFrame(table, 33_368)).toBe(1)
  })
})

describe('frameDuration', () => {
  it('is the time to the next frame, for the last one that before it, for a lone one 1/25 s', () => {
    expect(frameDuration(table, 2)).toBe(100_100)
    expect(frameDuration(table, 4)).toBe(33_367)
    expect(frameDuration(createFrameTable([0]), 0)).toBe(40_000)
  })
})

describe('clampFrame', () => {
  it('stays on frames that exist', () => {
    expect([-1, 2, 99].map(frame => clampFrame(table, frame))).toEqual([0, 2, 4])
    expect(timeOfFrame(table, 99)).toBe(183_517)
  })
})

describe('spreadFrames', () => {
  it('begins with the first, ends with the last, rises, and has none twice', () => {
    fc.assert(fc.property(tables, fc.integer({ min: 2, max: 20 }), (any, count) => {
      const frames = spreadFrames(any, count)
      expect(frames[0]).toBe(0)
      expect(frames.at(-1)).toBe(any.timesUs.length - 1)
      expect([...frames].sort((a, b) => a - b)).toEqual(frames)
      expect(new Set(frames).size).toBe(frames.length)
    }))
  })
})
