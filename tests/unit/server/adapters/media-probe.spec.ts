import { describe, expect, it } from 'vitest'
import { isMachineTrouble, parseProbe, parseRatio, readComplaint } from '#server/adapters/media-probe'

describe('parseProbe', () => {
  it('reads a phone clip', () => {
    const json = JSON.stringify({
      streams: [
        { index: 0, codec_type: 'audio', codec_name: 'aac', avg_frame_rate: '0/0' },
        { index: 1, codec_type: 'video', codec_name: 'hevc', width: 1920, height: 1080, sample_aspect_ratio: '1:1', avg_frame_rate: '30000/1001', duration: '12.5', nb_frames: '375', color_transfer: 'arib-std-b67', disposition: { attached_pic: 0 }, side_data_list: [{ side_data_type: 'Display Matrix', rotation: -90 }] },
        { index: 2, codec_type: 'data' },
      ],
      format: { nb_streams: 3, duration: '12.6' },
    })
    expect(parseProbe(json)).toEqual({
      streamCount: 3, videoCount: 1, attachmentCount: 0, duration: 12.5,
      video: { index: 1, codec: 'hevc', width: 1920, height: 1080, pixelAspect: 1, rotation: 270, frameRate: 30_000 / 1001, declaredFrames: 375, transfer: 'arib-std-b67' },
    })
  })

  it('takes a cover picture for no video', () => {
    const json = JSON.stringify({ streams: [{ index: 0, codec_type: 'video', codec_name: 'mjpeg', width: 600, height: 600, disposition: { attached_pic: 1 } }, { index: 1, codec_type: 'audio' }], format: { nb_streams: 2 } })
    expect(parseProbe(json)).toMatchObject({ videoCount: 0, video: null })
  })

  it('leaves open what a recorder in a browser does not write', () => {
    const json = JSON.stringify({ streams: [{ index: 0, codec_type: 'video', codec_name: 'vp9', width: 640, height: 480, avg_frame_rate: '0/0', duration: 'N/A' }], format: { nb_streams: 1 } })
    expect(parseProbe(json)).toMatchObject({ duration: null, video: { frameRate: null, declaredFrames: null, pixelAspect: 1 } })
  })
})

describe('parseRatio', () => {
  it('takes what divides and leaves the rest', () => {
    expect(['30000/1001', '4:3', '0/0', '0:1', 'N/A', '5/0', undefined].map(parseRatio)).toEqual([30_000 / 1001, 4 / 3, null, null, null, null, null])
  })
})

describe('readComplaint', () => {
  it.each([
    ['[h264 @ 0x1] [IMGUTILS @ 0x2] Picture size 7680x4320 exceeds specified max pixel count 9000000', 'picture-too-large'],
    ['[mov,mp4 @ 0x1] moov atom not found\nfile:in: Invalid data found when processing input', 'recording-incomplete'],
    ['[prores @ 0x1] Codec (prores) not on whitelist \'h264\'', 'codec-unsupported'],
    ['[concat @ 0x1] Format not on whitelist \'mov,matroska\'', 'not-a-video'],
    ['file:in: corrupt decoded frame in stream 0', 'damaged'],
    ['[aac @ 0x1] Codec (aac) not on whitelist \'h264\'\n[mov,mp4 @ 0x2] stream 1, offset 0x840af: partial file\nfile:in: corrupt input packet in stream 0', 'damaged'],
    ['[aac @ 0x1] Codec (aac) not on whitelist \'h264\'\n[h264 @ 0x2] error while decoding MB 18 22', 'damaged'],
  ])('reads «%s» as %s', (stderr, reason) => {
    expect(readComplaint(stderr)).toBe(reason)
  })
})

describe('isMachineTrouble', () => {
  it('does not blame the file for a full disk', () => {
    expect(isMachineTrouble('av_interleaved_write_frame(): No space left on device')).toBe(true)
    expect(isMachineTrouble('Invalid data found when processing input')).toBe(false)
  })
})
