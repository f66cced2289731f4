import { getRequestHeader, setResponseHeader, setResponseStatus, type H3Event } from 'h3'
import type { Readable } from 'node:stream'
import type { StoredAnswer } from '#server/services/clip-view-service'
import { AppError } from '#server/services/app-error'

/** What a page may want the bytes for; anything else is another site's page or a way to run them. */
export type Destination = 'video' | 'image' | 'document'
const RECHECK_MS = 5_000

/**
 * Pictures of patients are for our own pages: not for another site's, and not to be run. Clients that are no browser
 * send none of these headers.
 * @throws AppError `cross-origin`
 */
export function refuseHotlink(event: H3Event, destinations: readonly Destination[]): void {
  const site = getRequestHeader(event, 'sec-fetch-site')
  const destination = getRequestHeader(event, 'sec-fetch-dest')
  const isOurs = site === undefined || site === 'same-origin' || site === 'none'
  const isWanted = destination === undefined || destination === 'empty' || destinations.some(wanted => wanted === destination)
  if (!isOurs || !isWanted) throw new AppError('cross-origin')
}

function writeHead(event: H3Event, answer: StoredAnswer): void {
  const { range, size } = answer
  const headers: Record<string, string> = {
    'Content-Type': answer.type,
    'Content-Length': String(range ? range.end - range.start + 1 : size),
    'ETag': answer.etag,
    'Accept-Ranges': 'bytes',
    'Cache-Control': 'private, no-store',
    'Content-Disposition': `inline; filename="${answer.fileName}"`,
    'Content-Security-Policy': 'default-src \'none\'; sandbox',
    'X-Content-Type-Options': 'nosniff',
    'Cross-Origin-Resource-Policy': 'same-origin',
  }
  if (range) headers['Content-Range'] = `bytes ${range.start}-${range.end}/${size}`
  for (const [name, value] of Object.entries(headers)) setResponseHeader(event, name, value)
  setResponseStatus(event, answer.status)
}

/**
 * Answers with stored bytes as they come. When the browser goes away the storage's connection is freed at once; when
 * `mayGoOn` says no, as an answer that takes long is asked every few seconds, it is cut.
 * @returns the stream for the framework to send, or null for a 304
 */
export async function sendStored(event: H3Event, answer: StoredAnswer, mayGoOn?: () => Promise<boolean>): Promise<Readable | null> {
  if (getRequestHeader(event, 'if-none-match') === answer.etag) {
    setResponseHeader(event, 'ETag', answer.etag)
    setResponseStatus(event, 304)
    return null
  }
  const { res } = event.node
  const gone = new AbortController()
  const stream = await answer.open(gone.signal)
  const timer = mayGoOn ? setInterval(() => void mayGoOn().then(may => may || res.destroy(), () => res.destroy()), RECHECK_MS) : undefined
  res.once('close', () => {
    clearInterval(timer)
    gone.abort()
    stream.destroy()
  })
  // Half an answer must not look like a whole one.
  stream.once('error', () => res.destroy())
  writeHead(event, answer)
  return stream
}
