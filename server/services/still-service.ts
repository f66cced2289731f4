import { uuidv7 } from '#server/adapters/id'
import { findFrameTable, findClip } from '#server/database/queries/clip-queries'
import { findStill, keepStill, listMarkingsOfClip, listStills } from '#server/database/queries/still-queries'
import type { ClipStill, Still, StillInput } from '#shared/schemas/still'
import type { Actor } from './actor'
import { AppError } from './app-error'
import { recordAudit } from './audit-service'
import { changeClinic, readClinic } from './clinic-transaction'
import { findReadyClip } from './clip-view-service'

type Row = Awaited<ReturnType<typeof listStills>>[number]

function toStill(row: Row): Still {
  return { id: row.id, clipId: row.clipId, frame: row.frame, timeUs: row.timeUs, width: row.width, height: row.height }
}

/**
 * Picks a frame of a clip to be marked; the same frame gives the same still.
 * @throws AppError `clip-not-found`, `clip-not-ready`, `validation-failed` for a frame the clip does not have
 */
export function pickStill(actor: Actor, clipId: string, { frame }: StillInput): Promise<Still> {
  return changeClinic(actor, async (tx) => {
    const clip = await findReadyClip(tx, actor, clipId)
    const table = await findFrameTable(tx, clipId)
    const timeUs = table?.timesUs[frame]
    if (!table) throw new AppError('clip-not-ready')
    if (timeUs === undefined) throw new AppError('validation-failed', { issues: [{ path: 'frame', message: `The clip has ${clip.frameCount} frames` }] })
    const { still, isNew } = await keepStill(tx, { id: uuidv7(), clinicId: actor.clinicId, patientId: clip.patientId, clipId, frame, timeUs, width: clip.width, height: clip.height })
    if (isNew) await recordAudit(tx, actor, 'still.create', { type: 'still', id: still.id, patientId: clip.patientId }, null, { clipId, frame })
    return toStill(still)
  })
}

/** @throws AppError `still-not-found` */
export function readStill(actor: Actor, stillId: string): Promise<Still> {
  return readClinic(actor, async (tx) => {
    const found = await findStill(tx, actor, stillId)
    if (!found) throw new AppError('still-not-found')
    return toStill(found.still)
  })
}

/** @returns the stills of a clip in order of their frames, with what is marked on each. @throws AppError `clip-not-found` */
export function listStillsOfClip(actor: Actor, clipId: string): Promise<{ items: ClipStill[] }> {
  return readClinic(actor, async (tx) => {
    if (!await findClip(tx, actor, clipId)) throw new AppError('clip-not-found')
    const stills = await listStills(tx, clipId)
    const markings = await listMarkingsOfClip(tx, clipId)
    const items = stills.map(row => ({
      ...toStill(row),
      markings: markings.filter(marking => marking.stillId === row.id).map(({ id, version, status, author, savedAt }) => ({ id, version, status, author, savedAt: savedAt.toISOString() })),
    }))
    return { items }
  })
}
