import { getRequestHeader, type H3Event } from 'h3'
import { AppError } from '#server/services/app-error'

/** Larger bodies answer 413; the largest honest one (a marking with every landmark) is under 20 kB. */
export const MAX_BODY_BYTES = 1024 * 1024
/** How much of a too large body is read and dropped, so that its sender can still read our answer. */
const MAX_DRAIN_BYTES = 32 * 1024 * 1024

/** @returns the bytes of the request, counted as they come: a length header proves nothing and may be absent. */
async function readBytes(event: H3Event): Promise<Buffer> {
  const chunks: Buffer[] = []
  let size = 0
  for await (const chunk of event.node.req) {
    const bytes = Buffer.isBuffer(chunk) ? chunk : Buffer.from(String(chunk))
    size += bytes.length
    if (size > MAX_DRAIN_BYTES) break
    if (size <= MAX_BODY_BYTES) chunks.push(bytes)
  }
  if (size > MAX_BODY_BYTES) throw new AppError('body-too-large')
  return Buffer.concat(chunks)
}

/**
 * Reads a JSON body. Other content types are refused (415): a browser sends those across origins without asking.
 * @returns the parsed value and the exact bytes, for the idempotency hash.
 */
export async function readJsonBody(event: H3Event): Promise<{ value: unknown, bytes: Buffer }> {
  const bytes = await readBytes(event)
  const type = getRequestHeader(event, 'content-type')?.split(';')[0]?.trim().toLowerCase()
  if (type !== 'application/json') throw new AppError('unsupported-content-type')
  try {
    const value: unknown = JSON.parse(new TextDecoder('utf-8', { fatal: true }).decode(bytes))
    return { value, bytes }
  } catch (cause) {
    throw new AppError('validation-failed', { issues: [{ path: '', message: 'The body is not JSON' }], cause })
  }
}
