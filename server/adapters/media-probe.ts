import { z } from 'zod'

/** What a file says of itself, before anything of it is believed. */
export interface MediaFacts {
  streamCount: number
  videoCount: number
  attachmentCount: number
  /** Seconds; null when the file does not say. */
  duration: number | null
  video: VideoFacts | null
}

export interface VideoFacts {
  index: number
  codec: string
  /** Coded size, before it is turned upright. */
  width: number
  height: number
  /** Width of a pixel by its height. */
  pixelAspect: number
  /** Degrees, 0 to 360. */
  rotation: number
  /** Mean frames a second as the file declares them; null when it does not say. */
  frameRate: number | null
  declaredFrames: number | null
  /** `smpte2084` or `arib-std-b67` means high dynamic range. */
  transfer: string | null
}

/** Why ffprobe could not read a file. */
export type Unreadable = 'not-a-video' | 'recording-incomplete' | 'picture-too-large' | 'codec-unsupported' | 'damaged'

const StreamSchema = z.object({
  index: z.number(),
  codec_type: z.string().optional(),
  codec_name: z.string().optional(),
  width: z.number().optional(),
  height: z.number().optional(),
  sample_aspect_ratio: z.string().optional(),
  avg_frame_rate: z.string().optional(),
  duration: z.string().optional(),
  nb_frames: z.string().optional(),
  color_transfer: z.string().optional(),
  disposition: z.object({ attached_pic: z.number().optional() }).optional(),
  side_data_list: z.array(z.object({ rotation: z.number().optional() })).optional(),
})
type Stream = z.infer<typeof StreamSchema>
const AnswerSchema = z.object({
  streams: z.array(StreamSchema).default([]),
  format: z.object({ nb_streams: z.number().optional(), duration: z.string().optional() }).default({}),
})

/** `30000/1001` or `4:3` as a number; null for `0/0`, `0:1`, `N/A` and the like. */
export function parseRatio(text: string | undefined): number | null {
  const [above, below] = (text ?? '').split(/[/:]/).map(Number)
  const ratio = (above ?? 0) / (below ?? 0)
  return Number.isFinite(ratio) && ratio > 0 ? ratio : null
}

function parsePositive(text: string | undefined): number | null {
  const value = Number(text)
  return Number.isFinite(value) && value > 0 ? value : null
}

function toVideo(stream: Stream): VideoFacts {
  const turn = stream.side_data_list?.find(data => data.rotation !== undefined)?.rotation ?? 0
  return {
    index: stream.index,
    codec: stream.codec_name ?? 'unknown',
    width: stream.width ?? 0,
    height: stream.height ?? 0,
    pixelAspect: parseRatio(stream.sample_aspect_ratio) ?? 1,
    rotation: ((turn % 360) + 360) % 360,
    frameRate: parseRatio(stream.avg_frame_rate),
    declaredFrames: parsePositive(stream.nb_frames),
    transfer: stream.color_transfer ?? null,
  }
}

/** Reads ffprobe's JSON. A cover picture is not a video. @throws when it is not what ffprobe writes */
export function parseProbe(json: string): MediaFacts {
  const { streams, format } = AnswerSchema.parse(JSON.parse(json))
  const videos = streams.filter(stream => stream.codec_type === 'video' && stream.disposition?.attached_pic !== 1)
  const first = videos[0]
  return {
    streamCount: format.nb_streams ?? streams.length,
    videoCount: videos.length,
    attachmentCount: streams.filter(stream => stream.codec_type === 'attachment').length,
    duration: parsePositive(first?.duration) ?? parsePositive(format.duration),
    video: first ? toVideo(first) : null,
  }
}

/** Reads why a tool gave up from what it complained of. */
export function readComplaint(stderr: string): Unreadable {
  if (/exceeds specified max pixel|Picture size \d+x\d+ is invalid/.test(stderr)) return 'picture-too-large'
  if (/moov atom not found/.test(stderr)) return 'recording-incomplete'
  if (/Format not on whitelist/.test(stderr)) return 'not-a-video'
  // Before the codecs: the decoder of a sound track is not allowed either, and is complained of without harm.
  if (/corrupt|partial file|error while decoding|invalid NAL unit/i.test(stderr)) return 'damaged'
  if (/Codec .* not on whitelist|Unsupported codec|Decoder .* not found|unknown codec/i.test(stderr)) return 'codec-unsupported'
  return 'damaged'
}

/** Not the file's fault: the machine ran out of something. */
export function isMachineTrouble(stderr: string): boolean {
  return /No space left on device|Cannot allocate memory|Too many open files|Permission denied|Input\/output error/.test(stderr)
}
