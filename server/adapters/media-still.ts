import { strictInput } from './media-arguments'
import { TICKS_PER_SECOND } from './media-survey'
import type { ByteRange } from './storage-connection'

/** What is known of a review copy's frames and bytes. */
export interface FrameIndex { timesUs: readonly number[], keyFrames: readonly number[], keyOffsets: readonly number[], fileSize: number }

/** What must be fetched and asked for to decode one frame. */
export interface CutPlan {
  /** The stretches of the file to fetch; the rest of it may be a hole. */
  ranges: ByteRange[]
  /** Where to jump to: between this frame and the next, so that no rounding lands before its key frame. */
  seekSeconds: number
  /** Time stamp of the frame, ticks of 1/90000 s. */
  ticks: number
}

/** Index of the last key frame at or before `frame`. */
function keyBefore(keyFrames: readonly number[], frame: number): number {
  let key = 0
  while ((keyFrames[key + 1] ?? Infinity) <= frame) key += 1
  return key
}

/**
 * Plans the cut of one frame: the head of the file with its first stretch (ffmpeg looks at it to know the stream),
 * the stretch from the key frame before, and the stretch after that (the decoder reads ahead).
 * @throws RangeError when there is no such frame
 */
export function planCut(index: FrameIndex, frame: number): CutPlan {
  const timeUs = index.timesUs[frame]
  if (timeUs === undefined) throw new RangeError(`no frame ${frame}`)
  const key = keyBefore(index.keyFrames, frame)
  const endOf = (stretch: number) => (index.keyOffsets[stretch + 1] ?? index.fileSize) - 1
  const head = { start: 0, end: endOf(0) }
  const body = { start: index.keyOffsets[key] ?? 0, end: endOf(key + 1) }
  const nextUs = index.timesUs[frame + 1] ?? timeUs + 2_000
  return {
    ranges: body.start <= head.end + 1 ? [{ start: 0, end: Math.max(head.end, body.end) }] : [head, body],
    seekSeconds: (timeUs + nextUs) / 2e6,
    ticks: Math.round(timeUs * TICKS_PER_SECOND / 1e6),
  }
}

/** Decodes from the key frame before and writes the one frame with exactly this time stamp as PNG, full size. */
export function cutArguments(plan: CutPlan, files: { from: string, to: string }): string[] {
  const input = strictInput(files.from, 1, ['h264'])
  const seek = ['-noaccurate_seek', '-copyts', '-ss', plan.seekSeconds.toFixed(6)]
  return [
    ...input.slice(0, -2), ...seek, ...input.slice(-2),
    '-map', '0:v:0', '-vf', `select='eq(pts\\,${plan.ticks})',scale=flags=accurate_rnd+full_chroma_int+bicubic,format=rgb24`,
    '-frames:v', '1', '-fps_mode', 'passthrough', '-c:v', 'png', '-f', 'image2', `file:${files.to}`,
  ]
}
