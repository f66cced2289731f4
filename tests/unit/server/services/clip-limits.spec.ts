import { describe, expect, it } from 'vitest'
import type { MediaFacts, VideoFacts } from '#server/adapters/media-probe'
import { judgeFacts, judgeFrames, looksLikeVideo, meanFrameRate } from '#server/services/clip-limits'

const VIDEO: VideoFacts = { index: 0, codec: 'h264', width: 1920, height: 1080, pixelAspect: 1, rotation: 0, frameRate: 30, declaredFrames: 300, transfer: null }

function facts(video: Partial<VideoFacts> = {}, more: Partial<MediaFacts> = {}): MediaFacts {
  return { streamCount: 2, videoCount: 1, attachmentCount: 0, duration: 10, video: { ...VIDEO, ...video }, ...more }
}

describe('judgeFacts', () => {
  it.each<[string, MediaFacts, string | null]>([
    ['takes a phone clip', facts(), null],
    ['takes HEVC', facts({ codec: 'hevc' }), null],
    ['takes what a recorder in a browser leaves open', facts({ frameRate: null, declaredFrames: null, codec: 'vp9' }, { duration: null }), null],
    ['takes exactly ten minutes', facts({}, { duration: 600 }), null],
    ['refuses more than ten minutes', facts({}, { duration: 600.04 }), 'too-long'],
    ['refuses twenty minutes', facts({}, { duration: 1200 }), 'too-long'],
    ['takes half a second', facts({}, { duration: 0.5 }), null],
    ['refuses less than half a second', facts({}, { duration: 0.1 }), 'too-short'],
    ['refuses 7680 x 4320', facts({ width: 7680, height: 4320 }), 'picture-too-large'],
    ['takes 4096 x 2160', facts({ width: 4096, height: 2160 }), null],
    ['refuses a narrow picture of few pixels', facts({ width: 16_384, height: 96 }), 'picture-too-large'],
    ['refuses a square of more than 9 megapixels', facts({ width: 3001, height: 3001 }), 'picture-too-large'],
    ['refuses 95 pixels', facts({ width: 95, height: 720 }), 'picture-too-small'],
    ['takes 96 pixels', facts({ width: 96, height: 96 }), null],
    ['takes a quarter turn', facts({ rotation: 270 }), null],
    ['refuses a slanted turn', facts({ rotation: 37 }), 'rotation-unsupported'],
    ['refuses 4 frames a second', facts({ frameRate: 4 }), 'frame-rate-unsupported'],
    ['takes 240 frames a second', facts({ frameRate: 240 }), null],
    ['refuses 241 frames a second', facts({ frameRate: 241 }), 'frame-rate-unsupported'],
    ['refuses more frames than ten minutes at 60', facts({ declaredFrames: 36_001 }), 'too-long'],
    ['refuses a codec outside the list', facts({ codec: 'prores' }), 'codec-unsupported'],
    ['refuses sound alone', facts({}, { video: null, videoCount: 0 }), 'no-picture'],
    ['refuses nine streams', facts({}, { streamCount: 9 }), 'too-many-streams'],
    ['refuses three pictures', facts({}, { videoCount: 3, streamCount: 3 }), 'too-many-streams'],
    ['refuses attachments', facts({}, { attachmentCount: 1 }), 'too-many-streams'],
  ])('%s', (_rule, given, reason) => {
    expect(judgeFacts(given)).toBe(reason)
  })
})

describe('judgeFrames', () => {
  it.each<[string, Parameters<typeof judgeFrames>[0], string | null]>([
    ['takes 15 frames at 30 a second: half a second', { count: 15, lastUs: 466_667, durationUs: 500_000 }, null],
    ['takes half a second that is a microsecond short', { count: 15, lastUs: 466_666, durationUs: 499_999 }, null],
    ['refuses 14 of them', { count: 14, lastUs: 433_333, durationUs: 466_667 }, 'too-short'],
    ['refuses what goes on past ten minutes, whatever the header said', { count: 3010, lastUs: 600_500_000, durationUs: 600_700_000 }, 'too-long'],
    ['refuses more frames than ten minutes at 60', { count: 36_001, lastUs: 300_000_000, durationUs: 300_008_333 }, 'too-long'],
    ['refuses a frame a second', { count: 10, lastUs: 9_000_000, durationUs: 10_000_000 }, 'frame-rate-unsupported'],
  ])('%s', (_rule, frames, reason) => {
    expect(judgeFrames(frames)).toBe(reason)
  })
})

describe('meanFrameRate', () => {
  it('divides the intervals by the time between the first and the last frame', () => {
    expect(meanFrameRate({ count: 61, lastUs: 2_002_000, durationUs: 2_035_367 })).toBeCloseTo(29.97003, 5)
  })

  it('takes the length of a single frame', () => {
    expect(meanFrameRate({ count: 1, lastUs: 0, durationUs: 40_000 })).toBe(25)
  })
})

describe('looksLikeVideo', () => {
  const box = (name: string) => Buffer.concat([Buffer.from([0, 0, 0, 24]), Buffer.from(name), Buffer.alloc(16)])

  it.each([['ftyp'], ['moov'], ['mdat'], ['wide']])('takes a file that begins with %s', (name) => {
    expect(looksLikeVideo(box(name))).toBe(true)
  })

  it('takes Matroska and WebM', () => {
    expect(looksLikeVideo(Buffer.from('1a45dfa3934282886d6174726f', 'hex'))).toBe(true)
  })

  it.each([['text', 'a text that was named stand.mp4'], ['a play list', '#EXTM3U\n#EXT-X-VERSION:3'], ['ffconcat', 'ffconcat version 1.0'], ['an image', '\x89PNG\r\n\x1A\nxxxxxxxx'], ['three bytes', 'abc'], ['nothing', '']])('refuses %s', (_what, text) => {
    expect(looksLikeVideo(Buffer.from(text, 'latin1'))).toBe(false)
  })
})
