import { uuidv7 } from '#server/adapters/id'
import { storage } from '#server/adapters/storage'
import type { Transaction } from '#server/database/client'
import { findClip, hasBout, insertClip, touchUpload, type ClipRow } from '#server/database/queries/clip-queries'
import { hasConsent } from '#server/database/queries/patient-queries'
import { findSession } from '#server/database/queries/session-queries'
import { CLIP_CONTENT_TYPES, MAX_UPLOAD_BYTES, type Clip, type ClipInput, type UploadState } from '#shared/schemas/clip'
import type { Actor } from './actor'
import { AppError } from './app-error'
import { recordAudit } from './audit-service'
import { changeClinic, readClinic } from './clinic-transaction'
import { forRequest, newOriginalKey } from './clip-objects'
import { planUpload, sizeOfPart, toClip } from './clip-shape'

/** A clip whose upload is open, with the place of its parts in the storage. */
export type OpenUpload = ClipRow['clip'] & { uploadId: string }

function checkFile(input: ClipInput): string {
  if (input.size < 1) throw new AppError('validation-failed', { issues: [{ path: 'size', message: 'empty-file' }] })
  if (input.size > MAX_UPLOAD_BYTES) throw new AppError('clip-too-large')
  const type = input.contentType.split(';')[0]?.trim().toLowerCase()
  const taken = CLIP_CONTENT_TYPES.find(known => known === type)
  if (!taken) throw new AppError('unsupported-content-type')
  return taken
}

async function checkPlace(tx: Transaction, actor: Actor, sessionId: string, boutId: string | undefined) {
  const found = await findSession(tx, actor, sessionId)
  if (!found) throw new AppError('session-not-found')
  if (boutId && !await hasBout(tx, sessionId, boutId)) throw new AppError('bout-not-found')
  if (!await hasConsent(tx, found.session.patientId, 'recording')) throw new AppError('no-recording-consent')
  return found.session
}

/**
 * Begins the upload of a clip to a session: the parts go straight from the browser to the storage.
 * @throws AppError `session-not-found`, `bout-not-found`, `no-recording-consent`, `clip-too-large`,
 * `unsupported-content-type`, `validation-failed` for an empty file, `storage-unavailable`
 */
export async function beginUpload(actor: Actor, sessionId: string, input: ClipInput): Promise<{ clip: Clip, upload: { partSize: number, partCount: number } }> {
  const contentType = checkFile(input)
  await readClinic(actor, tx => checkPlace(tx, actor, sessionId, input.boutId))
  const id = uuidv7()
  const key = newOriginalKey(id)
  const upload = planUpload(input.size)
  const uploadId = await forRequest(storage().createUpload(key, contentType))
  try {
    return await changeClinic(actor, async (tx) => {
      const session = await checkPlace(tx, actor, sessionId, input.boutId)
      const row = await insertClip(tx, {
        id, clinicId: actor.clinicId, patientId: session.patientId, sessionId, boutId: input.boutId ?? null, uploadedById: actor.userId,
        fileName: input.fileName, size: input.size, contentType, view: input.view, side: input.side ?? null,
        recordedAt: input.recordedAt ? new Date(input.recordedAt) : null, originalKey: key, uploadId, ...upload,
      })
      await recordAudit(tx, actor, 'clip.create', { type: 'clip', id, patientId: session.patientId }, null, { sessionId, boutId: row.boutId, view: row.view, side: row.side, size: row.size, contentType })
      return { clip: toClip(row), upload }
    })
  } catch (error) {
    await forRequest(storage().abortUpload({ key, uploadId }))
    throw error
  }
}

/** @returns the row of an open upload. @throws AppError `clip-not-found`, `upload-not-open`, `no-recording-consent` */
export async function findOpenUpload(tx: Transaction, actor: Actor, clipId: string): Promise<OpenUpload> {
  const found = await findClip(tx, actor, clipId)
  if (!found) throw new AppError('clip-not-found')
  const { clip } = found
  if (clip.status !== 'uploading' || clip.uploadId === null) throw new AppError('upload-not-open')
  if (!await hasConsent(tx, clip.patientId, 'recording')) throw new AppError('no-recording-consent')
  return { ...clip, uploadId: clip.uploadId }
}

/** What the storage holds of an upload; an upload that it does not know is not open any more. */
export async function listStoredParts(row: OpenUpload) {
  return forRequest(storage().listParts({ key: row.originalKey, uploadId: row.uploadId }).catch((error: unknown) => {
    if (error instanceof Error && 'kind' in error && error.kind === 'absent') throw new AppError('upload-not-open', { cause: error })
    throw error
  }))
}

/**
 * The plan and the parts that the storage holds already, to go on after a break.
 * @throws AppError `clip-not-found`, `upload-not-open`, `no-recording-consent`, `storage-unavailable`
 */
export async function readUpload(actor: Actor, clipId: string): Promise<UploadState> {
  const row = await readClinic(actor, tx => findOpenUpload(tx, actor, clipId))
  return { partSize: row.partSize, partCount: row.partCount, parts: await listStoredParts(row) }
}

/**
 * Addresses to which the named parts can be put, each for exactly its bytes and for ten minutes.
 * @throws AppError `validation-failed` for a part that the plan does not have, and those of `readUpload`
 */
export async function signParts(actor: Actor, clipId: string, partNumbers: readonly number[]): Promise<{ parts: { partNumber: number, url: string }[] }> {
  const row = await changeClinic(actor, async (tx) => {
    const open = await findOpenUpload(tx, actor, clipId)
    await touchUpload(tx, clipId)
    return open
  })
  const beyond = partNumbers.findIndex(number => number > row.partCount)
  if (beyond >= 0) throw new AppError('validation-failed', { issues: [{ path: `partNumbers.${beyond}`, message: `The upload has ${row.partCount} parts` }] })
  const place = { key: row.originalKey, uploadId: row.uploadId }
  const parts = await Promise.all([...new Set(partNumbers)].map(async partNumber => ({ partNumber, url: await forRequest(storage().signPart(place, partNumber, sizeOfPart(row, partNumber))) })))
  return { parts }
}
