import { and, asc, count, desc, eq, exists, ilike, isNull, max, or, sql, type SQL } from 'drizzle-orm'
import type { AnyPgColumn } from 'drizzle-orm/pg-core'
import type { Transaction } from '../client'
import { bout } from '../schema/bout'
import { careTeamMember } from '../schema/care-team-member'
import { chartOpening } from '../schema/chart-opening'
import { consent } from '../schema/consent'
import { patient } from '../schema/patient'
import { session } from '../schema/session'
import { userAccount } from '../schema/user-account'
import { visiblePatients, type Viewer } from './access-queries'

/** `%` and `_` typed by a person are themselves. */
function likeText(text: string): string {
  return `%${text.replace(/[\\%_]/g, '\\$&')}%`
}

const lastSessionAt = (tx: Transaction) => tx.select({ patientId: session.patientId, at: max(session.startedAt).as('last_at') })
  .from(session).groupBy(session.patientId).as('last_session')

/** Longest finished bout of a patient, milliseconds. The table's name is spelt out: alone in a FROM its columns would be written bare, and inside mean the bout's. */
const longestBoutMs = sql<number | null>`(select round(max(extract(epoch from b.ended_at - b.started_at)) * 1000)::float8 from ${bout} b where b.clinic_id = ${patient}.clinic_id and b.patient_id = ${patient}.id and b.ended_at is not null)`

const SORTS: Record<string, SQL | AnyPgColumn> = {
  name: sql`lower(${patient.name})`,
  recordNumber: patient.recordNumber,
  birthDate: patient.birthDate,
  createdAt: patient.createdAt,
}

interface PatientFilter { search?: string | undefined, sort: string, page: number, pageSize: number }

export async function listPatients(tx: Transaction, viewer: Viewer, filter: PatientFilter) {
  const where = and(
    visiblePatients(viewer, patient.id),
    filter.search ? or(ilike(patient.name, likeText(filter.search)), ilike(patient.recordNumber, likeText(filter.search))) : undefined,
  )
  const last = lastSessionAt(tx)
  const field = filter.sort.replace(/^-/, '')
  const column = SORTS[field] ?? sql`${last.at}`
  const order = filter.sort.startsWith('-') ? sql`${desc(column)} nulls last` : sql`${asc(column)} nulls last`
  const rows = await tx.select({ patient, lastSessionAt: last.at, longestBoutMs }).from(patient)
    .leftJoin(last, eq(last.patientId, patient.id))
    .where(where).orderBy(order, asc(patient.id)).limit(filter.pageSize).offset((filter.page - 1) * filter.pageSize)
  const [sum] = await tx.select({ total: count() }).from(patient).where(where)
  return { rows, total: sum?.total ?? 0 }
}

export async function findPatient(tx: Transaction, viewer: Viewer, patientId: string) {
  const [row] = await tx.select().from(patient).where(and(eq(patient.id, patientId), visiblePatients(viewer, patient.id)))
  return row ?? null
}

/** Takes the row for a change: others wait until this transaction ends. */
export async function lockPatient(tx: Transaction, viewer: Viewer, patientId: string) {
  const [row] = await tx.select().from(patient).where(and(eq(patient.id, patientId), visiblePatients(viewer, patient.id))).for('update')
  return row ?? null
}

/** For stated-reason openings alone: any patient of the clinic. */
export async function findPatientOfClinic(tx: Transaction, by: { id: string } | { recordNumber: string }) {
  const where = 'id' in by ? eq(patient.id, by.id) : eq(patient.recordNumber, by.recordNumber)
  const [row] = await tx.select({ id: patient.id }).from(patient).where(where)
  return row ?? null
}

export async function insertPatient(tx: Transaction, row: typeof patient.$inferInsert) {
  const [created] = await tx.insert(patient).values(row).returning()
  if (!created) throw new Error('The patient row was not written')
  return created
}

export async function updatePatient(tx: Transaction, patientId: string, fields: Partial<typeof patient.$inferInsert>) {
  const [changed] = await tx.update(patient).set({ ...fields, version: sql`${patient.version} + 1`, updatedAt: sql`now()` }).where(eq(patient.id, patientId)).returning()
  if (!changed) throw new Error('The patient row was not changed')
  return changed
}

export async function listCareTeam(tx: Transaction, patientId: string) {
  return tx.select({ userId: careTeamMember.userId, name: userAccount.name, joinedAt: careTeamMember.joinedAt })
    .from(careTeamMember).innerJoin(userAccount, eq(userAccount.id, careTeamMember.userId))
    .where(eq(careTeamMember.patientId, patientId)).orderBy(asc(careTeamMember.joinedAt), asc(userAccount.name))
}

export async function isOnCareTeam(tx: Transaction, userId: string, patientId: string): Promise<boolean> {
  const rows = await tx.select({ one: sql`1` }).from(careTeamMember).where(and(eq(careTeamMember.patientId, patientId), eq(careTeamMember.userId, userId)))
  return rows.length > 0
}

export async function insertCareTeamMember(tx: Transaction, row: { clinicId: string, patientId: string, userId: string }): Promise<Date | null> {
  const [added] = await tx.insert(careTeamMember).values(row).onConflictDoNothing().returning({ joinedAt: careTeamMember.joinedAt })
  return added?.joinedAt ?? null
}

export async function deleteCareTeamMember(tx: Transaction, patientId: string, userId: string): Promise<boolean> {
  const removed = await tx.delete(careTeamMember).where(and(eq(careTeamMember.patientId, patientId), eq(careTeamMember.userId, userId))).returning({ userId: careTeamMember.userId })
  return removed.length > 0
}

export async function insertOpening(tx: Transaction, row: { id: string, clinicId: string, patientId: string, userId: string, reason: string, minutes: number }) {
  const { minutes, ...values } = row
  const [opened] = await tx.insert(chartOpening).values({ ...values, expiresAt: sql`now() + make_interval(mins => ${minutes})` }).returning()
  if (!opened) throw new Error('The opening was not written')
  return opened
}

export async function findOpeningEnd(tx: Transaction, userId: string, patientId: string): Promise<Date | null> {
  const [row] = await tx.select({ at: max(chartOpening.expiresAt) }).from(chartOpening)
    .where(and(eq(chartOpening.userId, userId), eq(chartOpening.patientId, patientId), sql`${chartOpening.expiresAt} > now()`))
  return row?.at ?? null
}

const recorder = sql<string>`(select name from ${userAccount} u where u.id = ${consent.recordedById})`
const withdrawer = sql<string | null>`(select name from ${userAccount} u where u.id = ${consent.withdrawnById})`

export async function listConsents(tx: Transaction, patientId: string) {
  return tx.select({ consent, recordedBy: recorder, withdrawnBy: withdrawer }).from(consent)
    .where(eq(consent.patientId, patientId)).orderBy(desc(consent.createdAt))
}

export async function findConsent(tx: Transaction, viewer: Viewer, consentId: string) {
  const [row] = await tx.select({ consent, recordedBy: recorder, withdrawnBy: withdrawer }).from(consent)
    .where(and(eq(consent.id, consentId), visiblePatients(viewer, consent.patientId)))
  return row ?? null
}

export async function insertConsent(tx: Transaction, row: typeof consent.$inferInsert) {
  await tx.insert(consent).values(row)
}

/** @returns whether it was in force until now. */
export async function withdrawConsentRow(tx: Transaction, consentId: string, userId: string): Promise<boolean> {
  const rows = await tx.update(consent).set({ withdrawnAt: sql`now()`, withdrawnById: userId })
    .where(and(eq(consent.id, consentId), isNull(consent.withdrawnAt))).returning({ id: consent.id })
  return rows.length > 0
}

/** @returns whether a consent of this kind is in force. */
export async function hasConsent(tx: Transaction, patientId: string, kind: 'recording' | 'teaching' | 'sharing'): Promise<boolean> {
  const [row] = await tx.select({ held: exists(tx.select({ one: sql`1` }).from(consent)
    .where(and(eq(consent.patientId, patientId), eq(consent.kind, kind), isNull(consent.withdrawnAt)))).mapWith(Boolean) }).from(sql`(select 1) as one`)
  return row?.held ?? false
}

export async function longestBoutOf(tx: Transaction, patientId: string): Promise<number | null> {
  const [row] = await tx.select({ longest: longestBoutMs }).from(patient).where(eq(patient.id, patientId))
  return row?.longest ?? null
}
