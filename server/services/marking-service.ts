import { uuidv7 } from '#server/adapters/id'
import type { Transaction } from '#server/database/client'
import {
  advanceMarking, findMarking, findStillForMarking, findTargets, insertMarking, insertVersion, listMarkingsOfStill, listReadings, lockMarking,
} from '#server/database/queries/marking-queries'
import { isOnCareTeam } from '#server/database/queries/patient-queries'
import type { Marking, MarkingInput, MeasureInput } from '#shared/schemas/marking'
import type { ReadingJson } from '#shared/schemas/reading'
import type { Actor } from './actor'
import { AppError } from './app-error'
import { recordAudit } from './audit-service'
import { changeClinic, readClinic } from './clinic-transaction'
import { measure } from './measure-service'
import { toReading } from './reading-shape'

type MarkingRow = NonNullable<Awaited<ReturnType<typeof findMarking>>>
type ReadingRow = Awaited<ReturnType<typeof listReadings>>[number]
interface Picture { still: { width: number, height: number }, view: MeasureInput['view'], side: 'left' | 'right' | null }

function toMarking(row: MarkingRow, readings: readonly ReadingRow[]): Marking {
  return {
    id: row.marking.id,
    stillId: row.marking.stillId,
    version: row.version.version,
    status: row.version.status,
    author: { id: row.marking.authorId, name: row.authorName },
    savedAt: row.version.savedAt.toISOString(),
    body: row.version.body,
    readings: readings.filter(reading => reading.markingId === row.marking.id && reading.markingVersion === row.version.version).map(toReading),
  }
}

async function readings(tx: Transaction, picture: Picture, input: MarkingInput): Promise<ReadingJson[]> {
  const { status, ...body } = input
  if (status === 'final' && Object.keys(body.landmarks).length === 0) throw new AppError('nothing-marked', { issues: [{ path: 'landmarks', message: 'nothing-marked' }] })
  // The near side is the clip's, unless the marking says otherwise.
  const side = body.side ?? picture.side ?? undefined
  return measure({ ...body, side, view: picture.view, width: picture.still.width, height: picture.still.height }, await findTargets(tx))
}

async function writeVersion(tx: Transaction, actor: Actor, target: { markingId: string, patientId: string, version: number }, input: MarkingInput, values: ReadingJson[]): Promise<void> {
  const { status, ...body } = input
  const { markingId, patientId, version } = target
  await insertVersion(
    tx,
    { clinicId: actor.clinicId, markingId, version, status, body, savedById: actor.userId },
    values.map(value => ({ ...value, id: uuidv7(), clinicId: actor.clinicId, patientId, markingId, markingVersion: version })),
  )
}

async function load(tx: Transaction, actor: Actor, markingId: string, version?: number): Promise<{ row: MarkingRow, marking: Marking }> {
  const row = await findMarking(tx, actor, markingId, version)
  if (!row) throw new AppError('marking-not-found')
  return { row, marking: toMarking(row, await listReadings(tx, [markingId])) }
}

/**
 * Saves one person's marking of a still as version 1. The readings are computed here; what the browser showed is not asked.
 * @throws AppError `still-not-found`, 400 naming the landmark or field
 */
export function createMarking(actor: Actor, stillId: string, input: MarkingInput): Promise<Marking> {
  return changeClinic(actor, async (tx) => {
    const found = await findStillForMarking(tx, actor, stillId)
    if (!found) throw new AppError('still-not-found')
    const values = await readings(tx, found, input)
    const id = uuidv7()
    const { patientId } = found.still
    await insertMarking(tx, { id, clinicId: actor.clinicId, patientId, stillId, authorId: actor.userId, currentVersion: 1, finalVersion: input.status === 'final' ? 1 : null })
    await writeVersion(tx, actor, { markingId: id, patientId, version: 1 }, input, values)
    await recordAudit(tx, actor, 'marking.create', { type: 'marking', id, patientId }, null, { version: 1, status: input.status, stillId })
    return (await load(tx, actor, id)).marking
  })
}

/**
 * Saves a new version; earlier ones stay.
 * @throws AppError `marking-not-found`, `not-allowed` for someone who is neither its author nor on the care team,
 * `stale-version` with the version that is kept now, 400 naming the landmark or field
 */
export function saveMarking(actor: Actor, markingId: string, version: number, input: MarkingInput): Promise<Marking> {
  return changeClinic(actor, async (tx) => {
    await lockMarking(tx, markingId)
    const { row, marking } = await load(tx, actor, markingId)
    const { patientId, authorId } = row.marking
    if (authorId !== actor.userId && !await isOnCareTeam(tx, actor.userId, patientId)) throw new AppError('not-allowed')
    if (marking.version !== version) throw new AppError('stale-version', { current: marking })
    const values = await readings(tx, row, input)
    const next = marking.version + 1
    await writeVersion(tx, actor, { markingId, patientId, version: next }, input, values)
    await advanceMarking(tx, markingId, next, input.status === 'final')
    await recordAudit(tx, actor, 'marking.save', { type: 'marking', id: markingId, patientId }, { version: marking.version, status: marking.status }, { version: next, status: input.status })
    return (await load(tx, actor, markingId)).marking
  })
}

/** @returns the current version, or the one asked for. @throws AppError `marking-not-found` */
export function readMarking(actor: Actor, markingId: string, version?: number): Promise<Marking> {
  return readClinic(actor, async tx => (await load(tx, actor, markingId, version)).marking)
}

/** @returns the current version of every marking of a still, newest first. @throws AppError `still-not-found` */
export function listMarkings(actor: Actor, stillId: string): Promise<{ items: Marking[] }> {
  return readClinic(actor, async (tx) => {
    if (!await findStillForMarking(tx, actor, stillId)) throw new AppError('still-not-found')
    const rows = await listMarkingsOfStill(tx, stillId)
    const values = await listReadings(tx, rows.map(row => row.marking.id))
    return { items: rows.map(row => toMarking(row, values)) }
  })
}

/** `POST /api/measure`: the readings of a body that is not kept. */
export function measureOnly(actor: Actor, input: MeasureInput): Promise<{ readings: ReadingJson[] }> {
  return readClinic(actor, async tx => ({ readings: measure(input, await findTargets(tx)) }))
}
