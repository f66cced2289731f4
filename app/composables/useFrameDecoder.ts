import { BlobSource, EncodedPacketSink, Input, MP4, UrlSource, VideoSampleSink } from 'mediabunny'
import type { InputVideoTrack, Source, VideoSample } from 'mediabunny'
import { createFrameTable, middleOfFrame, nearestFrame } from '~/marking/frames/frame-table'
import type { FrameTable } from '~/marking/frames/frame-table'

/** One frame as a picture that can be drawn. */
export interface FramePicture { readonly frame: number, readonly image: ImageBitmap }

export interface ReadingManner {
  /** Begin at the key frame before it, so that its neighbours come too (for stepping back). */
  readonly isRunUp: boolean
  /** Asked after each picture: whether this frame is still worth waiting for. */
  readonly goesOn: () => boolean
}

/** Reads frames from somewhere. One `read` at a time. */
export interface FrameReader {
  /**
   * Reads one frame and hands it to `onPicture`, and with it those that had to be decoded on the way and are not there yet.
   * @throws when the clip cannot be read or the frame cannot be decoded.
   */
  readonly read: (frame: number, how: ReadingManner) => Promise<void>
  readonly close: () => void
}

export interface FrameReaderOptions {
  readonly table: FrameTable
  readonly has: (frame: number) => boolean
  readonly onPicture: (picture: FramePicture) => void
}

/** The browser cannot decode this clip, or the file does not hold the frames that the server counted. */
export class FrameDecoderUnfit extends Error {}

const MICROSECONDS = 1_000_000
/** Frames that are rather decoded through than jumped over: about one key-frame distance of a review copy. */
const READ_ON = 16

function urlSource(url: string): Source {
  return new UrlSource(url, {
    requestInit: { credentials: 'same-origin' },
    getRetryDelay: attempts => attempts < 4 ? 0.4 * 2 ** attempts : null,
  })
}

/** Times of the file's own frames, seconds, in presentation order, and which are key frames. */
async function readStamps(track: InputVideoTrack): Promise<{ seconds: number[], keys: number[] }> {
  const stamps: { seconds: number, isKey: boolean }[] = []
  for await (const packet of new EncodedPacketSink(track).packets(undefined, undefined, { metadataOnly: true })) {
    stamps.push({ seconds: packet.timestamp, isKey: packet.type === 'key' })
  }
  stamps.sort((a, b) => a.seconds - b.seconds)
  return {
    seconds: stamps.map(stamp => stamp.seconds),
    keys: stamps.flatMap((stamp, frame) => stamp.isKey ? [frame] : []),
  }
}

async function openTrack(input: Input): Promise<InputVideoTrack> {
  const track = await input.getPrimaryVideoTrack()
  if (!track || !await track.canDecode()) throw new FrameDecoderUnfit('this browser does not decode the clip')
  return track
}

function toPicture(sample: VideoSample): Promise<ImageBitmap> {
  const frame = sample.toVideoFrame()
  return createImageBitmap(frame).finally(() => {
    frame.close()
    sample.close()
  })
}

/** Opens the review copy by range requests. @throws FrameDecoderUnfit */
export function openFrameDecoder(url: string, options: FrameReaderOptions): Promise<FrameReader> {
  return openDecoder(urlSource(url), options)
}

/** Opens a review copy that lies in memory. @throws FrameDecoderUnfit */
export function openBlobDecoder(blob: Blob, options: FrameReaderOptions): Promise<FrameReader> {
  return openDecoder(new BlobSource(blob), options)
}

/**
 * Frames by the time stamps of the file itself. A frame is recognised by its stamp, never by counting,
 * so that the picture shown is the frame that was asked for or none.
 */
async function openDecoder(source: Source, options: FrameReaderOptions): Promise<FrameReader> {
  if (typeof VideoDecoder === 'undefined') throw new FrameDecoderUnfit('this browser has no decoder')
  const input = new Input({ source, formats: [MP4] })
  try {
    const track = await openTrack(input)
    const { seconds, keys } = await readStamps(track)
    if (seconds.length !== options.table.timesUs.length) throw new FrameDecoderUnfit('the clip does not hold the frames that were counted')
    return createReader(input, new VideoSampleSink(track), seconds, keys, options)
  } catch (error) {
    input.dispose()
    throw error
  }
}

function createReader(input: Input, sink: VideoSampleSink, seconds: readonly number[], keys: readonly number[], options: FrameReaderOptions): FrameReader {
  const first = seconds[0] ?? 0
  const stamps = createFrameTable(seconds.map(second => (second - first) * MICROSECONDS))
  let samples: AsyncGenerator<VideoSample, void, unknown> | null = null
  let nextFrame = -1

  async function restart(frame: number) {
    await samples?.return()
    samples = sink.samples(first + middleOfFrame(stamps, frame) / MICROSECONDS)
    nextFrame = frame
  }

  async function readNext(): Promise<number> {
    const step = await samples?.next()
    if (!step || step.done) throw new Error('the clip ended before the frame')
    const frame = nearestFrame(stamps, (step.value.timestamp - first) * MICROSECONDS)
    nextFrame = frame + 1
    if (options.has(frame)) step.value.close()
    else options.onPicture({ frame, image: await toPicture(step.value) })
    return frame
  }

  return {
    async read(frame, { isRunUp, goesOn }) {
      try {
        const isOnTheWay = samples !== null && frame >= nextFrame && frame <= nextFrame + READ_ON
        if (!isOnTheWay) await restart(isRunUp ? keys.findLast(key => key <= frame) ?? frame : frame)
        for (let decoded = -1; decoded < frame && goesOn();) decoded = await readNext()
      } catch (error) {
        // A decoder that failed gives nothing more; the next frame begins with a new one.
        samples = null
        throw error
      }
    },
    close() {
      void samples?.return()
      input.dispose()
    },
  }
}
