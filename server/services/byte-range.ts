import type { ByteRange } from '#server/adapters/storage-connection'

const SINGLE = /^bytes=(\d*)-(\d*)$/

function readSuffix(length: number, size: number): ByteRange {
  if (length === 0) throw new RangeError('an empty suffix')
  return { start: Math.max(0, size - length), end: size - 1 }
}

/**
 * Reads a `Range` header for a body of `size` bytes (RFC 9110, section 14).
 * @returns the stretch; null when the whole body is the answer: no header, another unit, several ranges (a server may
 * answer those with the whole), or a header that is not one
 * @throws RangeError when the range lies outside the body (416)
 */
export function readRange(header: string | undefined, size: number): ByteRange | null {
  const [, first = '', last = ''] = SINGLE.exec(header?.trim() ?? '') ?? []
  if (first === '') return last === '' ? null : readSuffix(Number(last), size)
  const start = Number(first)
  // Last before first is no range at all, and is ignored.
  if (last !== '' && Number(last) < start) return null
  if (start >= size) throw new RangeError('past the end')
  return { start, end: last === '' ? size - 1 : Math.min(Number(last), size - 1) }
}

/**
 * @param header `If-Range`: an entity tag, or a date, which we do not keep and so never fits
 * @returns whether the range may be answered; without the header it may
 */
export function mayAnswerRange(header: string | undefined, etag: string): boolean {
  return header === undefined || header.trim() === etag
}
