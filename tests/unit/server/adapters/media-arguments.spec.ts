import { describe, expect, it } from 'vitest'
import { packetArguments, probeArguments, strictInput } from '#server/adapters/media-arguments'
import { planPicture, reviewArguments } from '#server/adapters/media-review'
import { cutArguments } from '#server/adapters/media-still'
import { surveyArguments } from '#server/adapters/media-survey'
import type { VideoFacts } from '#server/adapters/media-probe'

const VIDEO: VideoFacts = { index: 0, codec: 'h264', width: 1920, height: 1080, pixelAspect: 1, rotation: 0, frameRate: 30, declaredFrames: 300, transfer: null }
const BOUNDS = { seconds: 600.5, frames: 36_001, threads: 2 }
const FILES = { from: 'in', to: 'review.mp4' }
const STRIP = { columns: 2, rows: 1, tileWidth: 160, tileHeight: 90, frames: [3, 9] }

/** The value after each appearance of a flag. */
function valuesOf(args: readonly string[], flag: string): (string | undefined)[] {
  return args.flatMap((word, at) => word === flag ? [args[at + 1]] : [])
}

const REVIEW = reviewArguments(VIDEO, planPicture(VIDEO), FILES, BOUNDS)
const EVERY_CALL: Record<string, string[]> = {
  'ffprobe on the upload': probeArguments('in'),
  'ffprobe on the packets': packetArguments('review.mp4'),
  'the review copy': REVIEW,
  'the survey': surveyArguments({ from: 'review.mp4', report: 'r.txt', poster: 'p.webp', filmstrip: 'f.webp' }, { poster: 1, filmstrip: STRIP }, { width: 1920, height: 1080 }, 2),
  'the still': cutArguments({ ranges: [], seekSeconds: 1.25, ticks: 112_500 }, { from: 'in', to: 'still.png' }),
}

describe('every call of a media tool', () => {
  it.each(Object.entries(EVERY_CALL))('%s reads local mov and matroska files only, within bounds of size', (_name, args) => {
    expect(valuesOf(args, '-protocol_whitelist')).toEqual(['file'])
    expect(valuesOf(args, '-format_whitelist')).toEqual(['mov,matroska'])
    expect(valuesOf(args, '-max_pixels')).toEqual(['9000000'])
    expect(valuesOf(args, '-max_alloc')).toEqual(['268435456'])
    expect(args.some(word => word.startsWith('-codec_whitelist'))).toBe(true)
    expect(valuesOf(args, '-i').every(file => file?.startsWith('file:'))).toBe(true)
    // The bounds hold for the file that follows them.
    expect(args.indexOf('-protocol_whitelist')).toBeLessThan(args.indexOf('-i'))
    expect(args.indexOf('-max_pixels')).toBeLessThan(args.indexOf('-i'))
  })

  it('names outputs as files, so that a name cannot mean a protocol', () => {
    expect(REVIEW.at(-1)).toBe('file:review.mp4')
  })
})

describe('strictInput', () => {
  it('ends at the first damage and opens no decoder outside the list', () => {
    const args = strictInput('in', 2)
    expect(args).toContain('-xerror')
    expect(valuesOf(args, '-err_detect')).toEqual(['explode'])
    expect(valuesOf(args, '-codec_whitelist')).toEqual(['h264,hevc,vp8,vp9,libdav1d,mpeg4,mjpeg'])
  })
})

describe('reviewArguments', () => {
  it('keeps every frame and its time stamp', () => {
    expect(valuesOf(REVIEW, '-fps_mode')).toEqual(['passthrough'])
    expect(valuesOf(REVIEW, '-enc_time_base')).toEqual(['-1'])
    expect(valuesOf(REVIEW, '-video_track_timescale')).toEqual(['90000'])
    expect(valuesOf(REVIEW, '-bf')).toEqual(['0'])
    expect(valuesOf(REVIEW, '-vf')[0]).toContain('PTS-STARTPTS')
  })

  it('has a key frame every 15 frames or fewer, no sound, no metadata, and its head first', () => {
    expect(valuesOf(REVIEW, '-g')).toEqual(['15'])
    expect(REVIEW).toEqual(expect.arrayContaining(['-an', '-sn', '-dn']))
    expect(valuesOf(REVIEW, '-map_metadata')).toEqual(['-1'])
    expect(valuesOf(REVIEW, '-map_chapters')).toEqual(['-1'])
    expect(valuesOf(REVIEW, '-pix_fmt')).toEqual(['yuv420p'])
    expect(valuesOf(REVIEW, '-movflags')).toEqual(['+faststart'])
  })

  it('takes the video stream that was judged, and no other', () => {
    expect(valuesOf(reviewArguments({ ...VIDEO, index: 2 }, planPicture(VIDEO), FILES, BOUNDS), '-map')).toEqual(['0:2'])
  })

  it('brings high dynamic range to the range of a screen', () => {
    const filter = valuesOf(reviewArguments({ ...VIDEO, transfer: 'arib-std-b67' }, planPicture(VIDEO), FILES, BOUNDS), '-vf')[0]
    expect(filter).toContain('tonemap')
    expect(valuesOf(REVIEW, '-vf')[0]).not.toContain('tonemap')
  })
})

describe('planPicture', () => {
  it.each([
    ['keeps a picture that fits', { width: 1280, height: 720 }, { width: 1280, height: 720, isScaled: false }],
    ['turns a portrait phone clip upright', { width: 1920, height: 1080, rotation: 90 }, { width: 1080, height: 1920, isScaled: false }],
    ['keeps an upside-down clip in its shape', { width: 1920, height: 1080, rotation: 180 }, { width: 1920, height: 1080, isScaled: false }],
    ['halves 4K', { width: 3840, height: 2160 }, { width: 1920, height: 1080, isScaled: true }],
    ['halves portrait 4K', { width: 3840, height: 2160, rotation: 270 }, { width: 1080, height: 1920, isScaled: true }],
    ['cuts an odd edge instead of resampling', { width: 321, height: 241 }, { width: 320, height: 240, isScaled: false }],
    ['draws wide pixels out, so that angles are true', { width: 720, height: 576, pixelAspect: 64 / 45 }, { width: 1024, height: 576, isScaled: true }],
    ['draws tall pixels out', { width: 720, height: 480, pixelAspect: 8 / 9 }, { width: 720, height: 540, isScaled: true }],
    ['turns the pixels with the picture', { width: 720, height: 576, pixelAspect: 64 / 45, rotation: 90 }, { width: 576, height: 1024, isScaled: true }],
  ])('%s', (_name, change, expected) => {
    expect(planPicture({ ...VIDEO, ...change })).toEqual(expected)
  })
})
