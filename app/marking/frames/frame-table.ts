/** When each frame of a clip is shown, in presentation order. Never frame number over rate: real clips vary. */
export interface FrameTable {
  /** Microseconds from the first presented frame, strictly rising, first 0. */
  readonly timesUs: readonly number[]
}

/**
 * @param timesUs microseconds from the first presented frame.
 * @throws RangeError when there is none, or the times do not rise.
 */
export function createFrameTable(timesUs: readonly number[]): FrameTable {
  if (timesUs.length === 0) throw new RangeError('a frame table needs at least one frame')
  const falls = timesUs.findIndex((time, frame) => !Number.isFinite(time) || (frame > 0 && time <= (timesUs[frame - 1] ?? -Infinity)))
  if (falls >= 0) throw new RangeError(`frame times must rise: frame ${falls} does not`)
  return { timesUs }
}

/** The nearest frame number that exists. */
export function clampFrame(table: FrameTable, frame: number): number {
  return Math.min(Math.max(Math.round(frame), 0), table.timesUs.length - 1)
}

/** @returns when the frame is shown, microseconds; frames outside count as the nearest one. */
export function timeOfFrame(table: FrameTable, frame: number): number {
  return table.timesUs[clampFrame(table, frame)] ?? 0
}

/** @returns the frame on the screen at a moment: the last one shown at or before it; before the first, the first. */
export function frameAtTime(table: FrameTable, timeUs: number): number {
  let low = 0
  let high = table.timesUs.length - 1
  while (low < high) {
    const middle = Math.ceil((low + high) / 2)
    if ((table.timesUs[middle] ?? Infinity) <= timeUs) low = middle
    else high = middle - 1
  }
  return low
}

/** @returns the frame whose own time is nearest to a moment: for time stamps that were rounded on the way. */
export function nearestFrame(table: FrameTable, timeUs: number): number {
  const before = frameAtTime(table, timeUs)
  const after = clampFrame(table, before + 1)
  const away = (frame: number) => Math.abs(timeOfFrame(table, frame) - timeUs)
  return away(after) < away(before) ? after : before
}

/** How long the frame stays on the screen, microseconds; the last one as long as the one before it, a lone one 1/25 s. */
export function frameDuration(table: FrameTable, frame: number): number {
  const at = clampFrame(table, frame)
  const next = table.timesUs[at + 1]
  if (next !== undefined) return next - timeOfFrame(table, at)
  const previous = table.timesUs[at - 1]
  return previous === undefined ? 40_000 : timeOfFrame(table, at) - previous
}

/** A moment in the middle of the frame's time on the screen: where a player that seeks is sure to show it. */
export function middleOfFrame(table: FrameTable, frame: number): number {
  return timeOfFrame(table, frame) + frameDuration(table, frame) / 2
}

/** `count` frames spread evenly over the clip, first and last among them, none twice. */
export function spreadFrames(table: FrameTable, count: number): readonly number[] {
  const last = table.timesUs.length - 1
  const lastTime = timeOfFrame(table, last)
  const wanted = Math.min(count, table.timesUs.length)
  if (wanted <= 1) return [0]
  const frames = Array.from({ length: wanted }, (_, index) => nearestFrame(table, lastTime * index / (wanted - 1)))
  return [...new Set(frames)]
}
