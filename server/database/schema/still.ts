import { sql } from 'drizzle-orm'
import { check, foreignKey, integer, pgTable, text, unique, uuid } from 'drizzle-orm/pg-core'
import { big, id, moment } from './columns'
import { clip } from './clip'

/** One frame of a clip that was picked to be marked. */
export const still = pgTable('still', {
  id: id(),
  clinicId: uuid().notNull(),
  patientId: uuid().notNull(),
  clipId: uuid().notNull(),
  /** 0-based, presentation order of the review copy. */
  frame: integer().notNull(),
  timeUs: big().notNull(),
  width: integer().notNull(),
  height: integer().notNull(),
  /** Where the cut picture lies, once it was asked for. */
  imageKey: text(),
  createdAt: moment().notNull().defaultNow(),
}, table => [
  unique('still_clinic_id').on(table.clinicId, table.id),
  unique('still_patient_id').on(table.clinicId, table.patientId, table.id),
  unique('still_frame').on(table.clipId, table.frame),
  foreignKey({ name: 'still_clip', columns: [table.clinicId, table.patientId, table.clipId], foreignColumns: [clip.clinicId, clip.patientId, clip.id] }).onDelete('restrict'),
  check('still_frame_range', sql`${table.frame} >= 0 and ${table.timeUs} >= 0`),
  check('still_picture', sql`${table.width} > 0 and ${table.height} > 0`),
])
