import { and, asc, eq, isNull } from 'drizzle-orm'
import type { Transaction } from '../client'
import { clip } from '../schema/clip'
import { clipFrameTable } from '../schema/clip-frame-table'
import { marking } from '../schema/marking'
import { markingVersion } from '../schema/marking-version'
import { still } from '../schema/still'
import { userAccount } from '../schema/user-account'
import { visiblePatients, type Viewer } from './access-queries'

/** A still that this person may see, with what is needed to cut its picture. */
export async function findStill(tx: Transaction, viewer: Viewer, stillId: string) {
  const [row] = await tx.select({ still, reviewKey: clip.reviewKey, reviewSize: clip.reviewSize, frames: clipFrameTable }).from(still)
    .innerJoin(clip, eq(clip.id, still.clipId)).leftJoin(clipFrameTable, eq(clipFrameTable.clipId, still.clipId))
    .where(and(eq(still.id, stillId), visiblePatients(viewer, still.patientId)))
  return row ?? null
}

/** Adds a still, or finds the one of that frame. */
export async function keepStill(tx: Transaction, row: typeof still.$inferInsert) {
  const [created] = await tx.insert(still).values(row).onConflictDoNothing({ target: [still.clipId, still.frame] }).returning()
  if (created) return { still: created, isNew: true }
  const [kept] = await tx.select().from(still).where(and(eq(still.clipId, row.clipId), eq(still.frame, row.frame)))
  if (!kept) throw new Error('The still row was not written')
  return { still: kept, isNew: false }
}

export async function listStills(tx: Transaction, clipId: string) {
  return tx.select().from(still).where(eq(still.clipId, clipId)).orderBy(asc(still.frame))
}

/** The current version of each marking on the stills of a clip. */
export async function listMarkingsOfClip(tx: Transaction, clipId: string) {
  return tx.select({ stillId: marking.stillId, id: marking.id, version: markingVersion.version, status: markingVersion.status, author: userAccount.name, savedAt: markingVersion.savedAt })
    .from(marking)
    .innerJoin(still, eq(still.id, marking.stillId))
    .innerJoin(markingVersion, and(eq(markingVersion.markingId, marking.id), eq(markingVersion.version, marking.currentVersion)))
    .innerJoin(userAccount, eq(userAccount.id, marking.authorId))
    .where(eq(still.clipId, clipId)).orderBy(asc(marking.createdAt), asc(marking.id))
}

/** Notes where a still's picture lies. @returns false when another request was first, or the still is gone */
export async function setImageKey(tx: Transaction, stillId: string, key: string): Promise<boolean> {
  const rows = await tx.update(still).set({ imageKey: key }).where(and(eq(still.id, stillId), isNull(still.imageKey))).returning({ id: still.id })
  return rows.length > 0
}
