import { and, asc, count, desc, eq, gte, lte, sql } from 'drizzle-orm'
import type { Transaction } from '../client'
import { bout } from '../schema/bout'
import { clip } from '../schema/clip'
import { patient } from '../schema/patient'
import { session } from '../schema/session'
import { visiblePatients, type Viewer } from './access-queries'

const ofSession = sql`from ${bout} b where b.clinic_id = ${session.clinicId} and b.session_id = ${session.id}`
const lastOfSession = sql`${ofSession} order by b.started_at desc limit 1`

const rowFields = {
  session,
  patientName: patient.name,
  boutCount: sql<number>`(select count(*)::int ${ofSession})`,
  isRunning: sql<boolean>`exists (select 1 ${ofSession} and b.ended_at is null)`,
  longestBoutMs: sql<number | null>`(select round(max(extract(epoch from b.ended_at - b.started_at)) * 1000)::float8 ${ofSession})`,
  totalBoutMs: sql<number>`(select coalesce(round(sum(extract(epoch from b.ended_at - b.started_at)) * 1000)::float8, 0) ${ofSession})`,
  weightOffKg: sql<number | null>`(select b.weight_off_kg ${lastOfSession})`,
  assistance: sql<string | null>`(select b.assistance ${lastOfSession})`,
  helpers: sql<number | null>`(select b.helpers ${lastOfSession})`,
  clipCount: sql<number>`(select count(*)::int from ${clip} c where c.clinic_id = ${session.clinicId} and c.session_id = ${session.id} and c.status <> 'uploading')`,
}

interface SessionFilter { patientId?: string, from?: string | undefined, to?: string | undefined, page: number, pageSize: number, ascending?: boolean }

export async function listSessions(tx: Transaction, viewer: Viewer, filter: SessionFilter) {
  const where = and(
    visiblePatients(viewer, session.patientId),
    filter.patientId ? eq(session.patientId, filter.patientId) : undefined,
    filter.from ? gte(session.startedAt, new Date(filter.from)) : undefined,
    filter.to ? lte(session.startedAt, new Date(filter.to)) : undefined,
  )
  const order = filter.ascending ? asc(session.startedAt) : desc(session.startedAt)
  const rows = await tx.select(rowFields).from(session).innerJoin(patient, eq(patient.id, session.patientId))
    .where(where).orderBy(order, desc(session.id)).limit(filter.pageSize).offset((filter.page - 1) * filter.pageSize)
  const [sum] = await tx.select({ total: count() }).from(session).where(where)
  return { rows, total: sum?.total ?? 0 }
}

export async function findSession(tx: Transaction, viewer: Viewer, sessionId: string) {
  const [row] = await tx.select({ session, patientName: patient.name }).from(session).innerJoin(patient, eq(patient.id, session.patientId))
    .where(and(eq(session.id, sessionId), visiblePatients(viewer, session.patientId)))
  return row ?? null
}

/** Takes the session for a change, so that two bouts cannot be judged at the same moment. */
export async function lockSession(tx: Transaction, viewer: Viewer, sessionId: string) {
  const [row] = await tx.select().from(session).where(and(eq(session.id, sessionId), visiblePatients(viewer, session.patientId))).for('update')
  return row ?? null
}

export async function insertSession(tx: Transaction, row: typeof session.$inferInsert) {
  const [created] = await tx.insert(session).values(row).returning()
  if (!created) throw new Error('The session row was not written')
  return created
}

export async function updateSession(tx: Transaction, sessionId: string, fields: Partial<typeof session.$inferInsert>) {
  const [changed] = await tx.update(session).set({ ...fields, version: sql`${session.version} + 1`, updatedAt: sql`now()` }).where(eq(session.id, sessionId)).returning()
  if (!changed) throw new Error('The session row was not changed')
  return changed
}

export async function listBouts(tx: Transaction, sessionId: string) {
  return tx.select().from(bout).where(eq(bout.sessionId, sessionId)).orderBy(asc(bout.startedAt), asc(bout.id))
}

export async function findBout(tx: Transaction, viewer: Viewer, boutId: string) {
  const [row] = await tx.select({ bout, massKg: session.massKg }).from(bout)
    .innerJoin(session, and(eq(session.clinicId, bout.clinicId), eq(session.id, bout.sessionId)))
    .where(and(eq(bout.id, boutId), visiblePatients(viewer, bout.patientId)))
  return row ?? null
}

export async function lockBout(tx: Transaction, boutId: string) {
  await tx.select({ id: bout.id }).from(bout).where(eq(bout.id, boutId)).for('update')
}

export async function insertBout(tx: Transaction, row: typeof bout.$inferInsert) {
  const [created] = await tx.insert(bout).values(row).returning()
  if (!created) throw new Error('The bout row was not written')
  return created
}

export async function updateBout(tx: Transaction, boutId: string, fields: Partial<typeof bout.$inferInsert>) {
  const [changed] = await tx.update(bout).set({ ...fields, version: sql`${bout.version} + 1`, updatedAt: sql`now()` }).where(eq(bout.id, boutId)).returning()
  if (!changed) throw new Error('The bout row was not changed')
  return changed
}
