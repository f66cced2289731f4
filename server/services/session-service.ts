import { uuidv7 } from '#server/adapters/id'
import { findPatient } from '#server/database/queries/patient-queries'
import { findSession, insertSession, listBouts, listSessions, lockSession, updateSession } from '#server/database/queries/session-queries'
import type { ListOf } from '#shared/schemas/common'
import type { Session, SessionDetail, SessionInput, SessionListQuery, SessionPatch, SessionRow } from '#shared/schemas/session'
import type { Actor } from './actor'
import { AppError } from './app-error'
import { recordAudit } from './audit-service'
import { supportPercentOf, toBout } from './bout-shape'
import { changeClinic, readClinic } from './clinic-transaction'

type Row = NonNullable<Awaited<ReturnType<typeof lockSession>>>
type ListRow = Awaited<ReturnType<typeof listSessions>>['rows'][number]

function toSession(row: Row): Session {
  return {
    id: row.id, patientId: row.patientId, startedAt: row.startedAt.toISOString(), notes: row.notes, checklist: row.checklist,
    massKg: row.massKg, createdBy: row.createdById, version: row.version,
  }
}

/** @returns a row of a session list; support and help are those of its last bout. */
export function toSessionRow({ session, weightOffKg, ...row }: ListRow): SessionRow {
  return { ...toSession(session), ...row, supportPercent: supportPercentOf(weightOffKg, session.massKg) }
}

/**
 * @returns a page of sessions, newest first: of one patient, or of all that this person may see.
 * @throws AppError `patient-not-found`
 */
export function findSessions(actor: Actor, query: SessionListQuery, patientId?: string): Promise<ListOf<SessionRow>> {
  return readClinic(actor, async (tx) => {
    if (patientId && !await findPatient(tx, actor, patientId)) throw new AppError('patient-not-found')
    const { rows, total } = await listSessions(tx, actor, { ...query, ...(patientId ? { patientId } : {}) })
    return { items: rows.map(toSessionRow), total, page: query.page, pageSize: query.pageSize }
  })
}

/** @throws AppError `session-not-found` */
export function readSession(actor: Actor, sessionId: string): Promise<SessionDetail> {
  return readClinic(actor, async (tx) => {
    const found = await findSession(tx, actor, sessionId)
    if (!found) throw new AppError('session-not-found')
    const bouts = await listBouts(tx, sessionId)
    return { ...toSession(found.session), patientName: found.patientName, bouts: bouts.map(row => toBout(row, found.session.massKg)) }
  })
}

/**
 * Starts a session; it keeps the patient's mass of that day.
 * @throws AppError `patient-not-found`
 */
export function createSession(actor: Actor, patientId: string, input: SessionInput): Promise<Session> {
  return changeClinic(actor, async (tx) => {
    const patient = await findPatient(tx, actor, patientId)
    if (!patient) throw new AppError('patient-not-found')
    const row = await insertSession(tx, {
      id: uuidv7(), clinicId: actor.clinicId, patientId, startedAt: new Date(input.startedAt), notes: input.notes ?? null,
      checklist: input.checklist ?? [], massKg: patient.massKg, createdById: actor.userId,
    })
    await recordAudit(tx, actor, 'session.create', { type: 'session', id: row.id, patientId }, null, { startedAt: input.startedAt })
    return toSession(row)
  })
}

/**
 * Changes start, note or checklist.
 * @throws AppError `session-not-found`, `stale-version` with the present state
 */
export function changeSession(actor: Actor, sessionId: string, version: number, patch: SessionPatch): Promise<Session> {
  return changeClinic(actor, async (tx) => {
    const before = await lockSession(tx, actor, sessionId)
    if (!before) throw new AppError('session-not-found')
    if (before.version !== version) throw new AppError('stale-version', { current: toSession(before) })
    const { startedAt, ...rest } = patch
    const after = await updateSession(tx, sessionId, { ...rest, ...(startedAt ? { startedAt: new Date(startedAt) } : {}) })
    await recordAudit(tx, actor, 'session.change', { type: 'session', id: sessionId, patientId: before.patientId }, { version: before.version }, { version: after.version, fields: Object.keys(patch) })
    return toSession(after)
  })
}
