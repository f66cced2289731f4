import { and, asc, desc, eq, exists, gte, not, or, sql } from 'drizzle-orm'
import type { Transaction } from '../client'
import { bout } from '../schema/bout'
import { clip } from '../schema/clip'
import { marking } from '../schema/marking'
import { patient } from '../schema/patient'
import { still } from '../schema/still'
import { visiblePatients, type Viewer } from './access-queries'

/** @returns the first and last moment of today in that time zone. */
export async function findDayBounds(tx: Transaction, timeZone: string): Promise<{ from: Date, to: Date }> {
  const result = await tx.execute<{ from: Date, to: Date }>(sql`
    select date_trunc('day', now() at time zone ${timeZone}) at time zone ${timeZone} as "from",
      (date_trunc('day', now() at time zone ${timeZone}) + interval '1 day') at time zone ${timeZone} - interval '1 millisecond' as "to"`)
  const row = result.rows[0]
  if (!row) throw new Error('The day has no bounds')
  return { from: new Date(row.from), to: new Date(row.to) }
}

/** Clips that wait for someone: refused lately, still on their way, or ready and without a final marking. */
export async function listClipsThatWait(tx: Transaction, viewer: Viewer, limit: number) {
  const finalMarking = tx.select({ one: sql`1` }).from(marking).innerJoin(still, eq(still.id, marking.stillId))
    .where(and(eq(still.clipId, clip.id), sql`${marking.finalVersion} is not null`))
  const draftStill = sql<string | null>`(select s.id from ${still} s join ${marking} m on m.still_id = s.id where s.clip_id = ${clip.id} and m.final_version is null order by m.updated_at desc limit 1)`
  return tx.select({ clip, patientName: patient.name, draftStill }).from(clip).innerJoin(patient, eq(patient.id, clip.patientId))
    .where(and(
      visiblePatients(viewer, clip.patientId),
      or(
        and(eq(clip.status, 'refused'), gte(clip.updatedAt, sql`now() - interval '14 days'`)),
        sql`${clip.status} in ('uploading', 'processing')`,
        and(eq(clip.status, 'ready'), not(exists(finalMarking))),
      ),
    )).orderBy(desc(clip.createdAt)).limit(limit)
}

/** The table's name is spelt out in the sub-queries: alone in a FROM its columns would be written bare, and inside mean the inner table's. */
export async function listPeople(tx: Transaction, viewer: Viewer, limit: number) {
  return tx.select({
    patientId: patient.id,
    name: patient.name,
    weakerSide: patient.weakerSide,
    longestBoutMs: sql<number | null>`(select round(max(extract(epoch from b.ended_at - b.started_at)) * 1000)::float8 from ${bout} b where b.clinic_id = ${patient}.clinic_id and b.patient_id = ${patient}.id)`,
    clipCount: sql<number>`(select count(*)::int from ${clip} c where c.clinic_id = ${patient}.clinic_id and c.patient_id = ${patient}.id and c.status = 'ready')`,
  }).from(patient).where(visiblePatients(viewer, patient.id)).orderBy(asc(patient.name), asc(patient.id)).limit(limit)
}
