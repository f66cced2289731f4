import { strictInput } from './media-arguments'
import type { PictureSize } from './media-review'

/** Ticks of a review copy's time stamps in a second. */
export const TICKS_PER_SECOND = 90_000

/** The frames of a review copy in order of presentation. */
export interface FrameList {
  /** Microseconds from the first. */
  timesUs: number[]
  keyFrames: number[]
  /** Byte in the file where each key frame begins. */
  keyOffsets: number[]
  /** Last time stamp and how long it is shown. */
  durationUs: number
}

export interface FilmstripPlan { columns: number, rows: number, tileWidth: number, tileHeight: number, frames: number[] }

const TILES = 32
const COLUMNS = 8
const TILE_SIDE = 160
const POSTER_SIDE = 640

function toMicroseconds(ticks: number): number {
  return Math.round(ticks * 1e6 / TICKS_PER_SECOND)
}

/**
 * Reads `pts,duration,pos,flags` lines.
 * @throws when the time stamps do not rise from 0 or the first frame is no key frame: then it is not one of our copies
 */
export function parsePackets(csv: string): FrameList {
  const list: FrameList = { timesUs: [], keyFrames: [], keyOffsets: [], durationUs: 0 }
  let last = -1
  for (const line of csv.split('\n')) {
    if (line.trim() === '') continue
    const [pts, duration, position, flags = ''] = line.split(',')
    const ticks = Number(pts)
    if (!(ticks > last)) throw new Error(`time stamp ${pts} does not come after ${last}`)
    last = ticks
    if (flags.startsWith('K')) {
      list.keyFrames.push(list.timesUs.length)
      list.keyOffsets.push(Number(position))
    }
    list.timesUs.push(toMicroseconds(ticks))
    list.durationUs = toMicroseconds(ticks + (Number(duration) || 0))
  }
  if (list.timesUs[0] !== 0 || list.keyFrames[0] !== 0) throw new Error('the first frame is not a key frame at 0')
  return list
}

/** Reads the frames that were really decoded from a `framecrc` report. */
export function parseDecodedTimes(report: string): number[] {
  return report.split('\n').filter(line => line !== '' && !line.startsWith('#')).map(line => toMicroseconds(Number(line.split(',')[2])))
}

/** The frame shown at a time: the last one that began. `timesUs` rises from 0. */
export function frameAt(timesUs: readonly number[], timeUs: number): number {
  let low = 0
  let high = timesUs.length - 1
  while (low < high) {
    const middle = Math.ceil((low + high) / 2)
    if ((timesUs[middle] ?? Infinity) <= timeUs) low = middle
    else high = middle - 1
  }
  return low
}

/** Tiles evenly over the clip's time, each frame at most once; the long side of a tile is 160 px. */
export function planFilmstrip(list: FrameList, picture: PictureSize): FilmstripPlan {
  const wanted = Math.min(TILES, list.timesUs.length)
  const frames = [...new Set(Array.from({ length: wanted }, (_, tile) => frameAt(list.timesUs, (tile + 0.5) / wanted * list.durationUs)))]
  const factor = TILE_SIDE / Math.max(picture.width, picture.height)
  const columns = Math.min(COLUMNS, frames.length)
  return {
    columns,
    rows: Math.ceil(frames.length / columns),
    tileWidth: Math.max(2, 2 * Math.round(picture.width * factor / 2)),
    tileHeight: Math.max(2, 2 * Math.round(picture.height * factor / 2)),
    frames,
  }
}

function selectFrames(frames: readonly number[]): string {
  return `select='${frames.map(frame => `eq(n\\,${frame})`).join('+')}'`
}

function webp(file: string, quality: number): string[] {
  return ['-frames:v', '1', '-fps_mode', 'passthrough', '-c:v', 'libwebp', '-quality', String(quality), '-f', 'image2', `file:${file}`]
}

/**
 * Decodes the whole review copy once: writes which frames came out (so that none is missing when we say "ready"),
 * and cuts the poster and the filmstrip from the same pass.
 */
export function surveyArguments(
  files: { from: string, report: string, poster: string, filmstrip: string }, plan: { poster: number, filmstrip: FilmstripPlan }, picture: PictureSize, threads: number,
): string[] {
  const { filmstrip } = plan
  const factor = Math.min(1, POSTER_SIDE / Math.max(picture.width, picture.height))
  return [
    ...strictInput(files.from, threads, ['h264']),
    '-map', '0:v:0', '-fps_mode', 'passthrough', '-enc_time_base', '-1', '-c:v', 'wrapped_avframe', '-f', 'framecrc', `file:${files.report}`,
    '-map', '0:v:0', '-vf', `${selectFrames([plan.poster])},scale=${2 * Math.round(picture.width * factor / 2)}:${2 * Math.round(picture.height * factor / 2)}`, ...webp(files.poster, 80),
    '-map', '0:v:0', '-vf', `${selectFrames(filmstrip.frames)},scale=${filmstrip.tileWidth}:${filmstrip.tileHeight},tile=${filmstrip.columns}x${filmstrip.rows}`, ...webp(files.filmstrip, 75),
  ]
}
