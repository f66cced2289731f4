import { and, count, desc, eq, gt, inArray, isNull, lt, or, sql, type SQL } from 'drizzle-orm'
import type { Transaction } from '../client'
import { auditEvent } from '../schema/audit-event'
import { bout } from '../schema/bout'
import { clip } from '../schema/clip'
import { clipFrameTable } from '../schema/clip-frame-table'
import { marking } from '../schema/marking'
import { still } from '../schema/still'
import { visiblePatients, type Viewer } from './access-queries'

// The table's name is spelt out: alone in a FROM its columns would be written bare, and inside mean the inner table's.
const stillCount = sql<number>`(select count(*)::int from ${still} s where s.clip_id = ${clip}.id)`
const markingCount = sql<number>`(select count(*)::int from ${marking} m join ${still} s on s.id = m.still_id where s.clip_id = ${clip}.id)`
const clipFields = { clip, stillCount, markingCount }
export type ClipRow = Awaited<ReturnType<typeof listClips>>['rows'][number]

/** A clip that this person may see. */
export async function findClip(tx: Transaction, viewer: Viewer, clipId: string) {
  const [row] = await tx.select(clipFields).from(clip).where(and(eq(clip.id, clipId), visiblePatients(viewer, clip.patientId)))
  return row ?? null
}

/** A clip of one session or of one patient that this person may see, newest first. */
export async function listClips(tx: Transaction, viewer: Viewer, filter: { sessionId?: string, patientId?: string, page: number, pageSize: number }) {
  const where = and(
    visiblePatients(viewer, clip.patientId),
    filter.sessionId ? eq(clip.sessionId, filter.sessionId) : undefined,
    filter.patientId ? eq(clip.patientId, filter.patientId) : undefined,
  )
  const rows = await tx.select(clipFields).from(clip).where(where).orderBy(desc(clip.createdAt), desc(clip.id)).limit(filter.pageSize).offset((filter.page - 1) * filter.pageSize)
  const [sum] = await tx.select({ total: count() }).from(clip).where(where)
  return { rows, total: sum?.total ?? 0 }
}

/** Takes a clip for a change. */
export async function lockClip(tx: Transaction, viewer: Viewer, clipId: string) {
  const [row] = await tx.select().from(clip).where(and(eq(clip.id, clipId), visiblePatients(viewer, clip.patientId))).for('update')
  return row ?? null
}

export async function hasBout(tx: Transaction, sessionId: string, boutId: string): Promise<boolean> {
  const rows = await tx.select({ id: bout.id }).from(bout).where(and(eq(bout.id, boutId), eq(bout.sessionId, sessionId)))
  return rows.length > 0
}

export async function insertClip(tx: Transaction, row: typeof clip.$inferInsert) {
  const [created] = await tx.insert(clip).values(row).returning()
  if (!created) throw new Error('The clip row was not written')
  return created
}

/** Notes that an upload goes on, at most once a minute; idle ones are swept. */
export async function touchUpload(tx: Transaction, clipId: string) {
  await tx.update(clip).set({ updatedAt: sql`now()` }).where(and(eq(clip.id, clipId), eq(clip.status, 'uploading'), lt(clip.updatedAt, sql`now() - interval '1 minute'`)))
}

/** Ends an upload; of two that do it at once one gets true. */
export async function endUpload(tx: Transaction, clipId: string, next: Pick<typeof clip.$inferInsert, 'status' | 'reason'>): Promise<boolean> {
  const rows = await tx.update(clip).set({ ...next, uploadId: null, updatedAt: sql`now()` }).where(and(eq(clip.id, clipId), eq(clip.status, 'uploading'))).returning({ id: clip.id })
  return rows.length > 0
}

export async function countMarkings(tx: Transaction, clipId: string): Promise<number> {
  const [row] = await tx.select({ count: count() }).from(marking).innerJoin(still, eq(still.id, marking.stillId)).where(eq(still.clipId, clipId))
  return row?.count ?? 0
}

export async function listStillImages(tx: Transaction, clipId: string): Promise<string[]> {
  const rows = await tx.select({ key: still.imageKey }).from(still).where(eq(still.clipId, clipId))
  return rows.flatMap(row => row.key ?? [])
}

/** Deletes a clip with its stills and frame table. Marked stills make the database refuse. */
export async function deleteClip(tx: Transaction, clipId: string) {
  await tx.delete(still).where(eq(still.clipId, clipId))
  await tx.delete(clip).where(eq(clip.id, clipId))
}

export async function findFrameTable(tx: Transaction, clipId: string) {
  const [row] = await tx.select().from(clipFrameTable).where(eq(clipFrameTable.clipId, clipId))
  return row ?? null
}

/** @returns whether this person's sign-in has this line in the audit trail already; no sign-in lasts longer than twelve hours. */
export async function wasNoted(tx: Transaction, who: { userId: string, sessionId: string }, action: string, targetId: string): Promise<boolean> {
  const rows = await tx.select({ id: auditEvent.id }).from(auditEvent).where(and(
    eq(auditEvent.actorId, who.userId), gt(auditEvent.at, sql`now() - interval '12 hours'`), eq(auditEvent.signInSessionId, who.sessionId),
    eq(auditEvent.action, action), eq(auditEvent.targetId, targetId),
  )).limit(1)
  return rows.length > 0
}

/* What follows is for jobs: they act in the clinic of the row, with no person behind them. */

/** The clinic of a clip, asked before any clinic is set. */
export async function findClinicOfClip(tx: Transaction, clipId: string): Promise<string | null> {
  const { rows } = await tx.execute<{ clinic_id: string | null }>(sql`select job_clip_clinic(${clipId}::uuid) as clinic_id`)
  return rows[0]?.clinic_id ?? null
}

/** Clips that have been in a state and untouched for so long, of all clinics. */
export async function listIdleClips(tx: Transaction, status: 'uploading' | 'processing', idleSeconds: number) {
  const { rows } = await tx.execute<{ id: string, clinic_id: string }>(sql`select id, clinic_id from job_unfinished_clips(${status}, make_interval(secs => ${idleSeconds}))`)
  return rows.map(row => ({ id: row.id, clinicId: row.clinic_id }))
}

export async function findClipForJob(tx: Transaction, clipId: string) {
  const [row] = await tx.select().from(clip).where(eq(clip.id, clipId)).for('update')
  return row ?? null
}

const leaseFor = (seconds: number): SQL => sql`now() + make_interval(secs => ${seconds})`

/** Begins a run on a clip that no other run holds. The run's number fences it: one that was overtaken changes nothing. */
export async function claimClip(tx: Transaction, clipId: string, leaseSeconds: number) {
  const isFree = or(isNull(clip.leaseUntil), lt(clip.leaseUntil, sql`now()`))
  const [row] = await tx.update(clip).set({ attempt: sql`${clip.attempt} + 1`, leaseUntil: leaseFor(leaseSeconds), updatedAt: sql`now()` })
    .where(and(eq(clip.id, clipId), eq(clip.status, 'processing'), isFree)).returning()
  return row ?? null
}

/** A run of a job on a clip. */
export interface ClipRun { clipId: string, attempt: number }
function ofRun(run: ClipRun) {
  return and(eq(clip.id, run.clipId), eq(clip.attempt, run.attempt), eq(clip.status, 'processing'))
}

/** Extends a run's lease and shows how far it is. @returns false when the run was overtaken or the clip is gone */
export async function extendRun(tx: Transaction, run: ClipRun, progress: number, leaseSeconds: number): Promise<boolean> {
  const rows = await tx.update(clip).set({ progress, leaseUntil: leaseFor(leaseSeconds), updatedAt: sql`now()` }).where(ofRun(run)).returning({ id: clip.id })
  return rows.length > 0
}

/** Gives a clip back for another run. @returns how often its tools have died */
export async function releaseRun(tx: Transaction, run: ClipRun, isCrash: boolean): Promise<number> {
  const [row] = await tx.update(clip).set({ leaseUntil: null, ...(isCrash ? { crashes: sql`${clip.crashes} + 1` } : {}), updatedAt: sql`now()` }).where(ofRun(run)).returning({ crashes: clip.crashes })
  return row?.crashes ?? 0
}

/** Ends a run. @returns false when it was overtaken: then nothing was changed */
export async function endRun(tx: Transaction, run: ClipRun, result: Partial<typeof clip.$inferInsert>): Promise<boolean> {
  const rows = await tx.update(clip).set({ ...result, leaseUntil: null, updatedAt: sql`now()` }).where(ofRun(run)).returning({ id: clip.id })
  return rows.length > 0
}

export async function insertFrameTable(tx: Transaction, row: typeof clipFrameTable.$inferInsert) {
  await tx.insert(clipFrameTable).values(row)
}

/** Marks clips as just queued again, so that the next sweep leaves them alone for a while. */
export async function touchClips(tx: Transaction, clipIds: string[]) {
  await tx.update(clip).set({ updatedAt: sql`now()` }).where(inArray(clip.id, clipIds))
}
