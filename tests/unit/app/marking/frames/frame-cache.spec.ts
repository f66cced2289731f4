import { describe, expect, it } from 'vitest'
import { createFrameCache, framesToPrepare } from '~/marking/frames/frame-cache'

describe('createFrameCache', () => {
  it('drops the frame farthest from the one in sight and releases it once', () => {
    const released: string[] = []
    const cache = createFrameCache<string>(3, picture => released.push(picture))
    for (const frame of [1, 2, 3]) cache.put(frame, `f${frame}`, frame)
    cache.put(9, 'f9', 3)
    expect(released).toEqual(['f9'])
    cache.put(4, 'f4', 4)
    expect(released).toEqual(['f9', 'f1'])
    expect([1, 2, 3, 4].map(frame => cache.has(frame))).toEqual([false, true, true, true])
  })
  it('releases a frame that is replaced and everything when cleared', () => {
    const released: string[] = []
    const cache = createFrameCache<string>(3, picture => released.push(picture))
    cache.put(1, 'old', 1)
    cache.put(1, 'new', 1)
    expect(released).toEqual(['old'])
    cache.put(1, 'new', 1)
    expect(released).toEqual(['old'])
    cache.clear()
    expect(released).toEqual(['old', 'new'])
    expect(cache.size()).toBe(0)
  })
})

describe('framesToPrepare', () => {
  it('goes ahead in the direction of the last step, then back, within the clip, without what is there', () => {
    expect(framesToPrepare(5, 100, 1, 3, 2, frame => frame === 6)).toEqual([7, 8, 4, 3])
    expect(framesToPrepare(5, 100, -1, 3, 2, () => false)).toEqual([4, 3, 2, 6, 7])
    expect(framesToPrepare(0, 2, 1, 3, 2, () => false)).toEqual([1])
  })
})
