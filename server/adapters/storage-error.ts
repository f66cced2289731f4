/**
 * - `absent`: no such object or upload
 * - `bad-parts`: the list of parts does not fit what the storage holds
 * - `refused`: the storage answered and said no
 * - `away`: no answer, or an answer that promises one later
 */
export type StorageErrorKind = 'absent' | 'bad-parts' | 'refused' | 'away'

/** What the storage adapter throws. The message names the operation, never a key or a signed address. */
export class StorageError extends Error {
  override name = 'StorageError'
  constructor(readonly kind: StorageErrorKind, message: string, cause?: unknown) {
    super(message, { cause })
  }
}

const ABSENT = new Set(['NoSuchKey', 'NoSuchUpload', 'NotFound', 'NoSuchVersion'])
const BAD_PARTS = new Set(['InvalidPart', 'InvalidPartOrder', 'EntityTooSmall', 'MalformedXML', 'BadDigest'])

/** @returns the HTTP status of an answer of the SDK, or null when there was none. */
function statusOf(error: unknown): number | null {
  if (!(error instanceof Error) || !('$metadata' in error)) return null
  const metadata: unknown = error.$metadata
  if (!metadata || typeof metadata !== 'object' || !('httpStatusCode' in metadata)) return null
  return typeof metadata.httpStatusCode === 'number' ? metadata.httpStatusCode : null
}

/** @returns whether the storage said that the object or upload does not exist. */
export function isAbsent(error: unknown): boolean {
  return error instanceof Error && (ABSENT.has(error.name) || statusOf(error) === 404)
}

function kindOf(error: unknown): StorageErrorKind {
  if (isAbsent(error)) return 'absent'
  if (error instanceof Error && BAD_PARTS.has(error.name)) return 'bad-parts'
  const status = statusOf(error)
  return status !== null && status >= 400 && status < 500 && status !== 429 && status !== 408 ? 'refused' : 'away'
}

/** @returns the error as one of ours, with the operation in its message. */
export function toStorageError(what: string, error: unknown): StorageError {
  if (error instanceof StorageError) return error
  return new StorageError(kindOf(error), `${what}: ${error instanceof Error ? error.name : 'failed'}`, error)
}
