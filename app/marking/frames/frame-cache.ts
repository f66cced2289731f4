/** Decoded frames near the one in sight; the farthest go first. Frames hold memory outside of the heap, so each is released. */
export interface FrameCache<Frame> {
  readonly get: (frame: number) => Frame | undefined
  readonly has: (frame: number) => boolean
  /** Keeps a frame and drops what is farthest from `near` beyond the capacity. A frame kept already is replaced. */
  readonly put: (frame: number, picture: Frame, near: number) => void
  readonly clear: () => void
  readonly size: () => number
}

/**
 * @param capacity how many frames are kept, at least 1.
 * @param release frees what a frame holds; called exactly once for each frame that leaves.
 */
export function createFrameCache<Frame>(capacity: number, release: (picture: Frame) => void): FrameCache<Frame> {
  const frames = new Map<number, Frame>()

  function drop(frame: number) {
    const picture = frames.get(frame)
    if (picture === undefined) return
    frames.delete(frame)
    release(picture)
  }

  function farthestFrom(near: number): number {
    let farthest = near
    for (const frame of frames.keys()) {
      if (Math.abs(frame - near) > Math.abs(farthest - near)) farthest = frame
    }
    return farthest
  }

  return {
    get: frame => frames.get(frame),
    has: frame => frames.has(frame),
    put(frame, picture, near) {
      if (frames.get(frame) !== picture) drop(frame)
      frames.set(frame, picture)
      while (frames.size > Math.max(1, capacity)) drop(farthestFrom(near))
    },
    clear() {
      for (const frame of [...frames.keys()]) drop(frame)
    },
    size: () => frames.size,
  }
}

/**
 * The frames to decode while the person looks at `frame`, most wanted first: on in the direction of the last step,
 * then back. Those in the cache are left out.
 */
export function framesToPrepare(frame: number, count: number, direction: 1 | -1, ahead: number, behind: number, has: (frame: number) => boolean): readonly number[] {
  const on = Array.from({ length: ahead }, (_, index) => frame + direction * (index + 1))
  const back = Array.from({ length: behind }, (_, index) => frame - direction * (index + 1))
  return [...on, ...back].filter(candidate => candidate >= 0 && candidate < count && !has(candidate))
}
