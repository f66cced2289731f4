import { and, asc, desc, eq, inArray, sql } from 'drizzle-orm'
import type { Transaction } from '../client'
import { clinic } from '../schema/clinic'
import { clip } from '../schema/clip'
import { marking } from '../schema/marking'
import { markingVersion } from '../schema/marking-version'
import { reading } from '../schema/reading'
import { still } from '../schema/still'
import { userAccount } from '../schema/user-account'
import { visiblePatients, type Viewer } from './access-queries'

/** A still with what a marking on it needs to know of its clip. */
export async function findStillForMarking(tx: Transaction, viewer: Viewer, stillId: string) {
  const [row] = await tx.select({ still, view: clip.view, side: clip.side }).from(still).innerJoin(clip, eq(clip.id, still.clipId))
    .where(and(eq(still.id, stillId), visiblePatients(viewer, still.patientId)))
  return row ?? null
}

/** The clinic's own targets over the defaults. */
export async function findTargets(tx: Transaction) {
  const [row] = await tx.select({ targets: clinic.targets }).from(clinic)
  return row?.targets ?? {}
}

const fields = { marking, version: markingVersion, authorName: userAccount.name, view: clip.view, side: clip.side, still }

function markings(tx: Transaction) {
  return tx.select(fields).from(marking)
    .innerJoin(markingVersion, eq(markingVersion.markingId, marking.id))
    .innerJoin(still, eq(still.id, marking.stillId))
    .innerJoin(clip, eq(clip.id, still.clipId))
    .innerJoin(userAccount, eq(userAccount.id, marking.authorId))
}

/** @param version absent for the current one. */
export async function findMarking(tx: Transaction, viewer: Viewer, markingId: string, version?: number) {
  const [row] = await markings(tx).where(and(
    eq(marking.id, markingId),
    eq(markingVersion.version, version ?? sql`${marking.currentVersion}`),
    visiblePatients(viewer, marking.patientId),
  ))
  return row ?? null
}

export async function listMarkingsOfStill(tx: Transaction, stillId: string) {
  return markings(tx).where(and(eq(marking.stillId, stillId), eq(markingVersion.version, marking.currentVersion))).orderBy(desc(markingVersion.savedAt))
}

export async function lockMarking(tx: Transaction, markingId: string) {
  await tx.select({ id: marking.id }).from(marking).where(eq(marking.id, markingId)).for('update')
}

export async function listReadings(tx: Transaction, markingIds: string[]) {
  if (markingIds.length === 0) return []
  // Readings of one save share a moment; their ids, made in table order, keep that order.
  return tx.select().from(reading).where(inArray(reading.markingId, markingIds)).orderBy(asc(reading.id))
}

export async function insertMarking(tx: Transaction, row: typeof marking.$inferInsert) {
  await tx.insert(marking).values(row)
}

export async function insertVersion(tx: Transaction, version: typeof markingVersion.$inferInsert, readings: (typeof reading.$inferInsert)[]) {
  await tx.insert(markingVersion).values(version)
  if (readings.length > 0) await tx.insert(reading).values(readings)
}

export async function advanceMarking(tx: Transaction, markingId: string, version: number, isFinal: boolean) {
  await tx.update(marking).set({ currentVersion: version, ...(isFinal ? { finalVersion: version } : {}), updatedAt: sql`now()` }).where(eq(marking.id, markingId))
}
