import { and, asc, desc, eq, gte, inArray, lte, sql } from 'drizzle-orm'
import type { Transaction } from '../client'
import { bout } from '../schema/bout'
import { clip } from '../schema/clip'
import { marking } from '../schema/marking'
import { patient } from '../schema/patient'
import { reading } from '../schema/reading'
import { session } from '../schema/session'
import { still } from '../schema/still'
import { visibleOrOwn, type Viewer } from './access-queries'

/** When a reading was taken: the clip's moment, else the session's start. */
const takenAt = sql<Date>`coalesce(${clip.recordedAt}, ${session.startedAt})`.mapWith(clip.recordedAt)

/** Weight off the feet while it was taken: of the clip's bout, else of the session's bouts when they agree. */
const weightOffKg = sql<number | null>`coalesce(${bout.weightOffKg}, (
  select case when min(b.weight_off_kg) = max(b.weight_off_kg) then min(b.weight_off_kg) end from ${bout} b
  where ${clip.boutId} is null and b.clinic_id = ${session.clinicId} and b.session_id = ${session.id}))`

const fields = {
  reading, at: takenAt, stillId: still.id, clipId: clip.id, sessionId: session.id, boutId: clip.boutId, weightOffKg, massKg: session.massKg,
}

function readings(tx: Transaction) {
  return tx.select(fields).from(reading)
    .innerJoin(marking, and(eq(marking.id, reading.markingId), eq(marking.finalVersion, reading.markingVersion)))
    .innerJoin(still, eq(still.id, marking.stillId))
    .innerJoin(clip, eq(clip.id, still.clipId))
    .innerJoin(session, eq(session.id, clip.sessionId))
    .leftJoin(bout, eq(bout.id, clip.boutId))
}

interface TimelineFilter { measure?: string | undefined, from?: string | undefined, to?: string | undefined }

/** Readings of the latest final version of each marking, oldest first. */
export async function listTimelineReadings(tx: Transaction, patientId: string, filter: TimelineFilter) {
  return readings(tx).where(and(
    eq(reading.patientId, patientId),
    filter.measure ? eq(reading.measure, filter.measure) : undefined,
    filter.from ? gte(takenAt, new Date(filter.from)) : undefined,
    filter.to ? lte(takenAt, new Date(filter.to)) : undefined,
  )).orderBy(asc(takenAt), asc(reading.id))
}

/** The same for several patients and one measure, for the sparklines. */
export async function listReadingsOfPatients(tx: Transaction, patientIds: string[], measure: string) {
  if (patientIds.length === 0) return []
  return readings(tx).where(and(inArray(reading.patientId, patientIds), eq(reading.measure, measure))).orderBy(asc(takenAt), asc(reading.id))
}

/** The latest reading of a measure, for the chart header. */
export async function lastReading(tx: Transaction, patientId: string, measure: string) {
  const [row] = await readings(tx).where(and(eq(reading.patientId, patientId), eq(reading.measure, measure))).orderBy(desc(takenAt), desc(reading.id)).limit(1)
  return row ? { ...row.reading, at: row.at } : null
}

export async function listTimelineBouts(tx: Transaction, patientId: string) {
  return tx.select({ bout, massKg: session.massKg }).from(bout).innerJoin(session, eq(session.id, bout.sessionId))
    .where(eq(bout.patientId, patientId)).orderBy(asc(bout.startedAt), asc(bout.id))
}

/** @returns whether the person may see this patient's timeline: care team, opening, or it is their own. */
export async function maySeeTimeline(tx: Transaction, viewer: Viewer, patientId: string): Promise<boolean> {
  const rows = await tx.select({ id: patient.id }).from(patient).where(and(eq(patient.id, patientId), visibleOrOwn(viewer, patient.id)))
  return rows.length > 0
}
