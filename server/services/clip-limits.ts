import type { MediaFacts, VideoFacts } from '#server/adapters/media-probe'
import type { ClipRefusal } from '#shared/schemas/clip'

/** A clip lasts this long at least and at most, seconds. */
export const MIN_CLIP_SECONDS = 0.5
export const MAX_CLIP_SECONDS = 600
/** Ten minutes at 60 frames a second. */
export const MAX_FRAMES = 36_000
/** Sides of the picture, pixels; both together at most 9 megapixels. */
export const MIN_SIDE = 96
export const MAX_SIDE = 4096
export const MAX_PICTURE_PIXELS = 9_000_000
/** Frames a second, mean over the clip. */
export const MIN_FRAME_RATE = 5
export const MAX_FRAME_RATE = 240
/** A phone writes picture, sound and a few tracks of its own data. */
export const MAX_STREAMS = 8
export const MAX_VIDEO_STREAMS = 2
const CODECS = new Set(['h264', 'hevc', 'vp8', 'vp9', 'av1', 'mpeg4', 'mjpeg'])
/** A turn that a camera writes is a multiple of 90 degrees. */
const TURN_TOLERANCE_DEG = 1

/** How much of a file's beginning tells what it is. */
export const HEAD_BYTES = 4096
const EBML = Buffer.from([0x1A, 0x45, 0xDF, 0xA3])
/** First boxes of the MP4 family; QuickTime files from before `ftyp` begin with one of the others. */
const FIRST_BOXES = new Set(['ftyp', 'moov', 'mdat', 'wide', 'free', 'skip', 'pnot'])

/** @returns whether the first bytes are those of the MP4 and QuickTime family or of Matroska and WebM. */
export function looksLikeVideo(head: Buffer): boolean {
  return head.length >= 12 && (head.subarray(0, 4).equals(EBML) || FIRST_BOXES.has(head.toString('latin1', 4, 8)))
}

function judgePicture({ width, height, rotation }: VideoFacts): ClipRefusal | null {
  const [short, long] = [Math.min(width, height), Math.max(width, height)]
  if (long > MAX_SIDE || width * height > MAX_PICTURE_PIXELS) return 'picture-too-large'
  if (short < MIN_SIDE) return 'picture-too-small'
  const turn = rotation % 90
  return Math.min(turn, 90 - turn) > TURN_TOLERANCE_DEG ? 'rotation-unsupported' : null
}

function judgeLength(seconds: number): ClipRefusal | null {
  if (seconds < MIN_CLIP_SECONDS) return 'too-short'
  return seconds > MAX_CLIP_SECONDS ? 'too-long' : null
}

function judgeRate(framesPerSecond: number): ClipRefusal | null {
  return framesPerSecond < MIN_FRAME_RATE || framesPerSecond > MAX_FRAME_RATE ? 'frame-rate-unsupported' : null
}

function hasTooMuch({ attachmentCount, streamCount, videoCount }: MediaFacts): boolean {
  return attachmentCount > 0 || streamCount > MAX_STREAMS || videoCount > MAX_VIDEO_STREAMS
}

/** Judges a file by what it says of itself, before anything is decoded. @returns null when it may go on */
export function judgeFacts(facts: MediaFacts): ClipRefusal | null {
  const { video } = facts
  if (hasTooMuch(facts)) return 'too-many-streams'
  if (!video) return 'no-picture'
  if (!CODECS.has(video.codec)) return 'codec-unsupported'
  const isTooMany = (video.declaredFrames ?? 0) > MAX_FRAMES
  return judgePicture(video)
    ?? (facts.duration === null ? null : judgeLength(facts.duration))
    ?? (video.frameRate === null ? null : judgeRate(video.frameRate))
    ?? (isTooMany ? 'too-long' : null)
}

/** What the review copy really holds; times in microseconds from the first frame. */
export interface FrameFacts { count: number, lastUs: number, durationUs: number }

/** @returns the mean frames a second: intervals by the time between the first and the last frame. */
export function meanFrameRate({ count, lastUs, durationUs }: FrameFacts): number {
  return lastUs > 0 ? (count - 1) * 1e6 / lastUs : count * 1e6 / Math.max(1, durationUs)
}

/** Judges what really decoded: a header may say anything. @returns null when the clip is taken */
export function judgeFrames(frames: FrameFacts): ClipRefusal | null {
  if (frames.count > MAX_FRAMES) return 'too-long'
  // A frame's length is known to a microsecond: half a second of frames must not fail by one.
  const seconds = Math.round(frames.durationUs / 1000) / 1000
  return judgeLength(seconds) ?? judgeRate(meanFrameRate(frames))
}
