import { sql } from 'drizzle-orm'
import { check, foreignKey, integer, pgTable, uuid } from 'drizzle-orm/pg-core'
import { big } from './columns'
import { clip } from './clip'

/** Presentation times of the frames of a review copy, microseconds from the first; at most 10 minutes, so 31 bits hold them. */
export const clipFrameTable = pgTable('clip_frame_table', {
  clipId: uuid().primaryKey(),
  clinicId: uuid().notNull(),
  timesUs: integer().array().notNull(),
  /** The frames that decode without another, and where each begins in the file: a still needs one such stretch, not the clip. */
  keyFrames: integer().array().notNull(),
  keyOffsets: big().array().notNull(),
}, table => [
  foreignKey({ name: 'clip_frame_table_clip', columns: [table.clinicId, table.clipId], foreignColumns: [clip.clinicId, clip.id] }).onDelete('cascade'),
  check('clip_frame_table_first', sql`${table.timesUs}[1] = 0`),
  check('clip_frame_table_keys', sql`${table.keyFrames}[1] = 0 and cardinality(${table.keyFrames}) = cardinality(${table.keyOffsets})`),
])
