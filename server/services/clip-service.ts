import { countMarkings, deleteClip, findClip, listClips, listStillImages, lockClip } from '#server/database/queries/clip-queries'
import { findPatient } from '#server/database/queries/patient-queries'
import { findSession } from '#server/database/queries/session-queries'
import type { Clip } from '#shared/schemas/clip'
import type { ListOf } from '#shared/schemas/common'
import type { Actor } from './actor'
import { AppError } from './app-error'
import { recordAudit } from './audit-service'
import { changeClinic, readClinic } from './clinic-transaction'
import { keysOfRuns, queueErasure } from './clip-objects'
import { toClip } from './clip-shape'

type Page = Pick<ListOf<Clip>, 'page' | 'pageSize'>

/** @throws AppError `clip-not-found` */
export function readClip(actor: Actor, clipId: string): Promise<Clip> {
  return readClinic(actor, async (tx) => {
    const found = await findClip(tx, actor, clipId)
    if (!found) throw new AppError('clip-not-found')
    return toClip(found.clip, found)
  })
}

/** @returns a page of a session's clips, newest first. @throws AppError `session-not-found` */
export function listClipsOfSession(actor: Actor, sessionId: string, { page, pageSize }: Page): Promise<ListOf<Clip>> {
  return readClinic(actor, async (tx) => {
    if (!await findSession(tx, actor, sessionId)) throw new AppError('session-not-found')
    const { rows, total } = await listClips(tx, actor, { sessionId, page, pageSize })
    return { items: rows.map(row => toClip(row.clip, row)), total, page, pageSize }
  })
}

/** @returns a page of a patient's clips, newest first. @throws AppError `patient-not-found` */
export function listClipsOfPatient(actor: Actor, patientId: string, { page, pageSize }: Page): Promise<ListOf<Clip>> {
  return readClinic(actor, async (tx) => {
    if (!await findPatient(tx, actor, patientId)) throw new AppError('patient-not-found')
    const { rows, total } = await listClips(tx, actor, { patientId, page, pageSize })
    return { items: rows.map(row => toClip(row.clip, row)), total, page, pageSize }
  })
}

/**
 * Cancels an upload, or removes a clip with its stills. Every byte of it goes, soon after; a run that still works on
 * it finds no row and gives up. A marking is part of the record, also a draft: a clip with one stays.
 * @throws AppError `clip-not-found`, `clip-has-markings`
 */
export function removeClip(actor: Actor, clipId: string): Promise<void> {
  return changeClinic(actor, async (tx) => {
    const row = await lockClip(tx, actor, clipId)
    if (!row) throw new AppError('clip-not-found')
    if (await countMarkings(tx, clipId) > 0) throw new AppError('clip-has-markings')
    const keys = [row.originalKey, ...keysOfRuns(clipId, row.attempt), ...await listStillImages(tx, clipId)]
    await deleteClip(tx, clipId)
    await queueErasure(tx, { keys, ...(row.uploadId ? { upload: { key: row.originalKey, uploadId: row.uploadId } } : {}) })
    const action = row.status === 'uploading' ? 'clip.cancel' : 'clip.remove'
    await recordAudit(tx, actor, action, { type: 'clip', id: clipId, patientId: row.patientId }, { sessionId: row.sessionId, view: row.view, status: row.status, size: row.size })
  })
}
