import { FrameDecoderUnfit, openBlobDecoder, openFrameDecoder } from './useFrameDecoder'
import type { FrameReader, FrameReaderOptions, ReadingManner } from './useFrameDecoder'

/** Review copies up to this size are kept in the browser, so that a weak network cannot halt the work. */
const KEEP_BYTES = 80_000_000

/** @returns the whole review copy, or `null` when it is too large to be kept or the server does not give it. */
async function fetchReviewCopy(url: string, signal: AbortSignal): Promise<Blob | null> {
  const answer = await fetch(url, { signal })
  const size = Number(answer.headers.get('content-length') ?? Number.NaN)
  if (answer.ok && size > 0 && size <= KEEP_BYTES) return answer.blob()
  await answer.body?.cancel()
  return null
}

/** @returns the decoder, or `null` where this browser cannot decode the clip. @throws when the clip cannot be reached. */
async function openOrNone(url: string, options: FrameReaderOptions): Promise<FrameReader | null> {
  try {
    return await openFrameDecoder(url, options)
  } catch (error) {
    if (error instanceof FrameDecoderUnfit) return null
    throw error
  }
}

/**
 * The way in which frames come: decoded here from the review copy, first by ranges and then, for clips of a usual
 * size, from memory; or as pictures of the server where the browser cannot decode.
 */
export function useFrameReader(clipId: string, options: FrameReaderOptions) {
  const mode = ref<'opening' | 'decoder' | 'server'>('opening')
  const mediaUrl = `/api/clips/${clipId}/media`
  const controller = new AbortController()
  const server = useFrameServer(clipId).openFrameServer(options)
  let reader: FrameReader | null = null
  let replacement: FrameReader | null = null
  let isReading = false

  async function open(): Promise<FrameReader> {
    reader ??= await openOrNone(mediaUrl, options) ?? server
    mode.value = reader === server ? 'server' : 'decoder'
    return reader
  }

  function swapIfIdle() {
    if (isReading || !replacement) return
    reader?.close()
    reader = replacement
    replacement = null
  }

  /** Fetches the review copy once and reads from memory from then on. */
  async function keep() {
    if (mode.value !== 'decoder') return
    const copy = await fetchReviewCopy(mediaUrl, controller.signal)
    if (copy) replacement = await openBlobDecoder(copy, options)
    if (controller.signal.aborted) replacement?.close()
    else swapIfIdle()
  }

  /**
   * Where the decoder fails on a frame that a person waits for, the server's picture of it is the same frame.
   * @throws when neither gives it.
   */
  async function read(frame: number, how: ReadingManner & { isWaitedFor: boolean }) {
    isReading = true
    try {
      await (await open()).read(frame, how)
    } catch (error) {
      if (controller.signal.aborted || !how.isWaitedFor || mode.value !== 'decoder') throw error
      await server.read(frame, how)
    } finally {
      isReading = false
      swapIfIdle()
    }
  }

  function close() {
    controller.abort()
    for (const opened of [reader, replacement, server]) opened?.close()
  }

  return { mode, read, keep, close, isClosed: () => controller.signal.aborted }
}
