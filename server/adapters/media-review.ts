import { strictInput } from './media-arguments'
import type { VideoFacts } from './media-probe'

/** Long side of a review copy at most, pixels. */
export const MAX_REVIEW_SIDE = 1920
/** A random jump costs as much as the way to the key frame before it. */
export const KEY_FRAME_EVERY = 15
const RATE_FACTOR = 20
const MAX_RATE = '16M'
const RATE_BUFFER = '32M'

export interface PictureSize { width: number, height: number }
export interface ReviewPlan extends PictureSize { isScaled: boolean }
/** Where to stop although the file goes on: the truth is what decodes, not what the header says. */
export interface ReviewBounds { seconds: number, frames: number, threads: number }

function toEven(value: number): number {
  return Math.max(2, 2 * Math.round(value / 2))
}

/**
 * Size of the review copy: upright, square pixels, long side at most 1920, both sides even (4:2:0 needs it).
 * Without a change of scale an odd edge column or row is cut off, so that no pixel is resampled.
 */
export function planPicture(video: VideoFacts): ReviewPlan {
  const isTurned = Math.round(video.rotation / 90) % 2 === 1
  const aspect = isTurned ? 1 / video.pixelAspect : video.pixelAspect
  const [width, height] = isTurned ? [video.height, video.width] : [video.width, video.height]
  // The coarser direction is drawn out, so that no detail is lost.
  const shown = { width: width * Math.max(1, aspect), height: height * Math.max(1, 1 / aspect) }
  const factor = Math.min(1, MAX_REVIEW_SIDE / Math.max(shown.width, shown.height))
  if (factor === 1 && aspect === 1) return { width: width - width % 2, height: height - height % 2, isScaled: false }
  return { width: toEven(shown.width * factor), height: toEven(shown.height * factor), isScaled: true }
}

/**
 * Times count from the first presented frame, and two frames never share one: a broken clip that says so gets the
 * smallest step its time base has.
 */
const TIMES_FROM_FIRST = 'setpts=\'if(isnan(PREV_OUTPTS),0,max(PTS-STARTPTS,PREV_OUTPTS+1))\''
/** High dynamic range to the range of every screen and of PNG; without it skin is grey. */
const TONE_MAP = ['zscale=t=linear:npl=100', 'format=gbrpf32le', 'zscale=p=bt709', 'tonemap=hable:desat=0', 'zscale=t=bt709:m=bt709:r=tv', 'format=yuv420p']

function filters(video: VideoFacts, plan: ReviewPlan): string {
  const size = plan.isScaled ? `scale=${plan.width}:${plan.height}:flags=lanczos` : `crop=${plan.width}:${plan.height}:0:0`
  const isHighRange = video.transfer === 'smpte2084' || video.transfer === 'arib-std-b67'
  return [TIMES_FROM_FIRST, size, ...(isHighRange ? TONE_MAP : []), 'setsar=1'].join(',')
}

/**
 * The review copy: every presented frame (after edit lists) with its own time stamp, upright, no sound, no
 * metadata, a key frame every 15 frames or fewer. `-enc_time_base -1` keeps the time base of the clip: without it
 * a variable-rate clip moves by up to 17 ms. No B-frames: the order in the file is the order of presentation.
 */
export function reviewArguments(video: VideoFacts, plan: ReviewPlan, files: { from: string, to: string }, bounds: ReviewBounds): string[] {
  return [
    ...strictInput(files.from, bounds.threads),
    '-map', `0:${video.index}`, '-an', '-sn', '-dn', '-map_metadata', '-1', '-map_chapters', '-1',
    '-t', String(bounds.seconds), '-frames:v', String(bounds.frames),
    '-vf', filters(video, plan),
    '-c:v', 'libx264', '-preset', 'veryfast', '-crf', String(RATE_FACTOR), '-maxrate', MAX_RATE, '-bufsize', RATE_BUFFER, '-pix_fmt', 'yuv420p',
    '-bf', '0', '-g', String(KEY_FRAME_EVERY), '-threads', String(bounds.threads),
    '-fps_mode', 'passthrough', '-enc_time_base', '-1', '-video_track_timescale', '90000',
    '-fflags', '+bitexact', '-movflags', '+faststart', '-progress', 'pipe:1', '-stats_period', '0.5', '-f', 'mp4', `file:${files.to}`,
  ]
}

export interface ReviewProgress { frames: number, seconds: number }

/** Gathers the lines of `-progress`; gives the state at the end of each report. */
export function readProgress(onProgress: (progress: ReviewProgress) => void): (line: string) => void {
  const now: ReviewProgress = { frames: 0, seconds: 0 }
  return (line) => {
    const [name, value] = line.split('=')
    const number = Number(value)
    if (name === 'frame' && Number.isFinite(number)) now.frames = number
    if (name === 'out_time_us' && Number.isFinite(number)) now.seconds = Math.max(0, number / 1e6)
    if (name === 'progress') onProgress({ ...now })
  }
}
