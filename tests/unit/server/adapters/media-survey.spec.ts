import { describe, expect, it } from 'vitest'
import { frameAt, parseDecodedTimes, parsePackets, planFilmstrip } from '#server/adapters/media-survey'
import { planCut } from '#server/adapters/media-still'
import { readProgress, type ReviewProgress } from '#server/adapters/media-review'

const PACKETS = ['0,3003,48,K_', '3003,3003,900,__', '6006,1501,1500,__', '7507,3003,2000,K_', ''].join('\n')

describe('parsePackets', () => {
  it('lists the frames in order with their times in microseconds', () => {
    expect(parsePackets(PACKETS)).toEqual({ timesUs: [0, 33_367, 66_733, 83_411], keyFrames: [0, 3], keyOffsets: [48, 2000], durationUs: 116_778 })
  })

  it.each([
    ['a time stamp twice', '0,3000,48,K_\n0,3000,90,__'],
    ['a time stamp that falls', '0,3000,48,K_\n6000,3000,90,__\n3000,3000,120,__'],
    ['a first time stamp after 0', '3000,3000,48,K_'],
    ['a first frame that needs another', '0,3000,48,__'],
    ['no frames', ''],
  ])('refuses %s', (_name, csv) => {
    expect(() => parsePackets(csv)).toThrow()
  })
})

describe('parseDecodedTimes', () => {
  it('reads the presentation times of a framecrc report', () => {
    expect(parseDecodedTimes('#tb 0: 1/90000\n#media_type 0: video\n0,          0,          0,     3000,      472, 0xe1201b94\n0,       3003,       3003,     3000,      472, 0x758e1a1a\n')).toEqual([0, 33_367])
  })
})

describe('frameAt', () => {
  it('gives the frame that is on screen at a time', () => {
    const times = [0, 33_367, 66_733, 83_411]
    expect([0, 33_366, 33_367, 70_000, 83_411, 9e9].map(time => frameAt(times, time))).toEqual([0, 0, 1, 2, 3, 3])
  })
})

describe('planFilmstrip', () => {
  const even = { timesUs: Array.from({ length: 300 }, (_, frame) => Math.round(frame * 1e6 / 30)), keyFrames: [0], keyOffsets: [0], durationUs: 10_000_000 }

  it('spreads 32 tiles evenly over the time', () => {
    const plan = planFilmstrip(even, { width: 1920, height: 1080 })
    expect(plan).toMatchObject({ columns: 8, rows: 4, tileWidth: 160, tileHeight: 90 })
    expect(plan.frames).toHaveLength(32)
    expect([plan.frames[0], plan.frames[16], plan.frames[31]]).toEqual([4, 154, 295])
  })

  it('shows each frame of a very short clip once', () => {
    const plan = planFilmstrip({ ...even, timesUs: [0, 100_000, 200_000], durationUs: 300_000 }, { width: 1080, height: 1920 })
    expect(plan).toEqual({ columns: 3, rows: 1, tileWidth: 90, tileHeight: 160, frames: [0, 1, 2] })
  })
})

describe('planCut', () => {
  const index = { timesUs: Array.from({ length: 60 }, (_, frame) => Math.round(frame * 1e6 / 30)), keyFrames: [0, 15, 30, 45], keyOffsets: [1_000, 50_000, 90_000, 120_000], fileSize: 150_000 }

  it('fetches the head and the stretches around the frame, and nothing else', () => {
    expect(planCut(index, 35).ranges).toEqual([{ start: 0, end: 49_999 }, { start: 90_000, end: 149_999 }])
    expect(planCut(index, 59).ranges).toEqual([{ start: 0, end: 49_999 }, { start: 120_000, end: 149_999 }])
  })

  it('fetches one stretch when they touch', () => {
    expect(planCut(index, 0).ranges).toEqual([{ start: 0, end: 89_999 }])
    expect(planCut(index, 15).ranges).toEqual([{ start: 0, end: 119_999 }])
  })

  it('jumps past the frame\'s own time and before the next, and asks for its exact tick', () => {
    const plan = planCut(index, 15)
    expect(plan.ticks).toBe(45_000)
    expect(plan.seekSeconds).toBeGreaterThan(0.5)
    expect(plan.seekSeconds).toBeLessThan(16 / 30)
  })

  it('finds the tick again from the rounded microseconds, for every tick of a minute', () => {
    // timeUs = round(ticks * 1e6 / 90000) loses at most half a microsecond, a tick is eleven: the way back is exact.
    for (let ticks = 0; ticks < 60 * 90_000; ticks += 1) {
      const timeUs = Math.round(ticks * 1e6 / 90_000)
      if (Math.round(timeUs * 90_000 / 1e6) !== ticks) expect.fail(`tick ${ticks}`)
    }
  })

  it('knows no frame past the last', () => {
    expect(() => planCut(index, 60)).toThrow(RangeError)
  })
})

describe('readProgress', () => {
  it('reports once for each block of lines', () => {
    const seen: ReviewProgress[] = []
    const read = readProgress(progress => seen.push(progress))
    for (const line of ['frame=12', 'out_time_us=366678', 'progress=continue', 'frame=30', 'out_time_us=N/A', 'progress=end']) read(line)
    expect(seen).toEqual([{ frames: 12, seconds: 0.366678 }, { frames: 30, seconds: 0.366678 }])
  })
})
