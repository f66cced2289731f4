import { storage } from '#server/adapters/storage'
import { bareEtag, type StoredPart } from '#server/adapters/storage-connection'
import { StorageError } from '#server/adapters/storage-error'
import { endUpload, findClip } from '#server/database/queries/clip-queries'
import { hasConsent } from '#server/database/queries/patient-queries'
import type { Clip, ClipRefusal, UploadCompleteInput } from '#shared/schemas/clip'
import type { Actor } from './actor'
import { AppError } from './app-error'
import { recordAudit } from './audit-service'
import { changeClinic, readClinic } from './clinic-transaction'
import { HEAD_BYTES, looksLikeVideo } from './clip-limits'
import { forRequest, queueErasure, queueProcessing } from './clip-objects'
import { toClip } from './clip-shape'
import { findOpenUpload, listStoredParts, type OpenUpload } from './clip-upload-service'

/** Every part once, none beyond the plan. @throws AppError `validation-failed`, `part-missing` with the numbers */
function checkNumbers(given: UploadCompleteInput['parts'], partCount: number): void {
  const seen = new Set<number>()
  for (const [at, { partNumber }] of given.entries()) {
    if (partNumber > partCount || seen.has(partNumber)) {
      throw new AppError('validation-failed', { issues: [{ path: `parts.${at}.partNumber`, message: partNumber > partCount ? `The upload has ${partCount} parts` : 'This part is named twice' }] })
    }
    seen.add(partNumber)
  }
  failMissing(Array.from({ length: partCount }, (_, at) => at + 1).filter(number => !seen.has(number)))
}

const NAMED_PARTS = 50

function failMissing(numbers: readonly number[]): void {
  if (numbers.length === 0) return
  throw new AppError('part-missing', { issues: numbers.slice(0, NAMED_PARTS).map(number => ({ path: `parts.${number}`, message: 'part-missing' })) })
}

/** @throws AppError `part-missing` for parts the storage does not hold, `etag-mismatch` for parts it holds with other bytes */
function checkStored(given: UploadCompleteInput['parts'], stored: readonly StoredPart[]): void {
  const held = new Map(stored.map(part => [part.partNumber, part.etag]))
  failMissing(given.filter(part => !held.has(part.partNumber)).map(part => part.partNumber))
  const other = given.filter(part => held.get(part.partNumber) !== bareEtag(part.etag))
  if (other.length > 0) throw new AppError('etag-mismatch', { issues: other.slice(0, NAMED_PARTS).map(part => ({ path: `parts.${part.partNumber}`, message: 'etag-mismatch' })) })
}

/** Joins the parts, unless a request before this one has. @returns the size of the object, or null when there is none */
async function joinParts(row: OpenUpload, given: UploadCompleteInput['parts']): Promise<number | null> {
  const place = { key: row.originalKey, uploadId: row.uploadId }
  try {
    const stored = await listStoredParts(row)
    checkStored(given, stored)
    return (await storage().completeUpload(place, stored.filter(part => part.partNumber <= row.partCount))).size
  } catch (error) {
    const isGone = (error instanceof AppError && error.code === 'upload-not-open') || (error instanceof StorageError && error.kind === 'absent')
    if (isGone) return (await forRequest(storage().head(row.originalKey)))?.size ?? null
    if (error instanceof StorageError && error.kind === 'bad-parts') throw new AppError('etag-mismatch', { cause: error })
    return forRequest(Promise.reject(error))
  }
}

/** Looks at the object itself: what was declared proves nothing. */
async function judgeObject(row: OpenUpload, size: number): Promise<ClipRefusal | null> {
  if (size !== row.size) return 'size-mismatch'
  const head = await forRequest(storage().read(row.originalKey, { start: 0, end: Math.min(HEAD_BYTES, size) - 1 }))
  return looksLikeVideo(head) ? null : 'not-a-video'
}

async function endWith(actor: Actor, row: OpenUpload, reason: ClipRefusal | null): Promise<Clip> {
  return changeClinic(actor, async (tx) => {
    // Consent that was withdrawn while the last parts came in counts.
    if (!reason && !await hasConsent(tx, row.patientId, 'recording')) throw new AppError('no-recording-consent')
    if (await endUpload(tx, row.id, { status: reason ? 'refused' : 'processing', reason })) {
      if (reason) await queueErasure(tx, { keys: [row.originalKey] })
      else await queueProcessing(tx, row.id)
      await recordAudit(tx, actor, reason ? 'clip.refuse' : 'clip.upload', { type: 'clip', id: row.id, patientId: row.patientId }, { status: 'uploading' }, reason ? { status: 'refused', reason } : { status: 'processing', size: row.size })
    }
    const found = await findClip(tx, actor, row.id)
    if (!found) throw new AppError('clip-not-found')
    return toClip(found.clip, found)
  })
}

/**
 * Ends an upload: compares the parts with what the storage holds, joins them, looks at the object and queues the job.
 * Asked again after it succeeded, it answers the clip as it is.
 * @throws AppError `clip-not-found`, `part-missing`, `etag-mismatch`, `upload-not-open` for a refused clip, `no-recording-consent`, `storage-unavailable`
 */
export async function completeUpload(actor: Actor, clipId: string, input: UploadCompleteInput): Promise<{ clip: Clip }> {
  const { done, open } = await readClinic(actor, async (tx) => {
    const found = await findClip(tx, actor, clipId)
    if (!found) throw new AppError('clip-not-found')
    const isDone = found.clip.status === 'processing' || found.clip.status === 'ready'
    return isDone ? { done: toClip(found.clip, found), open: null } : { done: null, open: await findOpenUpload(tx, actor, clipId) }
  })
  if (!open) return { clip: done }
  checkNumbers(input.parts, open.partCount)
  const size = await joinParts(open, input.parts)
  if (size === null) throw new AppError('upload-not-open')
  return { clip: await endWith(actor, open, await judgeObject(open, size)) }
}
