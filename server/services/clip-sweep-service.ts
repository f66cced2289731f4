import { uuidv7 } from '#server/adapters/id'
import { logger } from '#server/adapters/logger'
import { withoutClinic } from '#server/database/client'
import { deleteClip, findClipForJob, listIdleClips, touchClips } from '#server/database/queries/clip-queries'
import type { ClinicScope } from './actor'
import { recordAudit } from './audit-service'
import { changeClinic } from './clinic-transaction'
import { queueErasure, queueProcessing } from './clip-objects'

/** An upload nobody went on with for a day is dropped. */
const UPLOAD_IDLE_SECONDS = 24 * 60 * 60
/** A run shows itself every few seconds: a clip this quiet has no run, or a queue before it that is this long. */
const RUN_IDLE_SECONDS = 10 * 60

function dropUpload(scope: ClinicScope, clipId: string): Promise<boolean> {
  return changeClinic(scope, async (tx) => {
    const row = await findClipForJob(tx, clipId)
    if (row?.status !== 'uploading' || row.updatedAt.getTime() > Date.now() - UPLOAD_IDLE_SECONDS * 1000) return false
    await deleteClip(tx, clipId)
    await queueErasure(tx, { keys: [row.originalKey], ...(row.uploadId ? { upload: { key: row.originalKey, uploadId: row.uploadId } } : {}) })
    await recordAudit(tx, scope, 'clip.expire', { type: 'clip', id: clipId, patientId: row.patientId }, { status: 'uploading', sessionId: row.sessionId, size: row.size })
    return true
  })
}

function queueAgain(scope: ClinicScope, clipId: string): Promise<boolean> {
  return changeClinic(scope, async (tx) => {
    const row = await findClipForJob(tx, clipId)
    if (row?.status !== 'processing') return false
    await queueProcessing(tx, clipId)
    await touchClips(tx, [clipId])
    return true
  })
}

async function sweep(status: 'uploading' | 'processing', idleSeconds: number, act: (scope: ClinicScope, clipId: string) => Promise<boolean>): Promise<number> {
  const idle = await withoutClinic(tx => listIdleClips(tx, status, idleSeconds))
  let count = 0
  for (const { id, clinicId } of idle) {
    if (await act({ clinicId, requestId: uuidv7() }, id)) count += 1
  }
  return count
}

/** Drops uploads that were left, and queues clips again whose job was lost. */
export async function sweepClips(): Promise<'done'> {
  const dropped = await sweep('uploading', UPLOAD_IDLE_SECONDS, dropUpload)
  const queued = await sweep('processing', RUN_IDLE_SECONDS, queueAgain)
  if (dropped + queued > 0) logger.info({ dropped, queued }, 'clips swept')
  return 'done'
}
