import { sql } from 'drizzle-orm'
import { check, foreignKey, index, integer, pgTable, unique, uuid } from 'drizzle-orm/pg-core'
import { id, timestamps } from './columns'
import { still } from './still'
import { userAccount } from './user-account'

/** One person's marking of a still; what was marked lies in `marking_version`. */
export const marking = pgTable('marking', {
  id: id(),
  clinicId: uuid().notNull(),
  patientId: uuid().notNull(),
  stillId: uuid().notNull(),
  authorId: uuid().notNull(),
  currentVersion: integer().notNull().default(1),
  /** The latest version that was saved as final: its readings are on the timeline. */
  finalVersion: integer(),
  ...timestamps,
}, table => [
  unique('marking_clinic_id').on(table.clinicId, table.id),
  unique('marking_patient_id').on(table.clinicId, table.patientId, table.id),
  index('marking_by_still').on(table.stillId),
  index('marking_by_patient').on(table.clinicId, table.patientId),
  foreignKey({ name: 'marking_still', columns: [table.clinicId, table.patientId, table.stillId], foreignColumns: [still.clinicId, still.patientId, still.id] }).onDelete('restrict'),
  foreignKey({ name: 'marking_author', columns: [table.clinicId, table.authorId], foreignColumns: [userAccount.clinicId, userAccount.id] }).onDelete('restrict'),
  check('marking_versions', sql`${table.currentVersion} >= 1 and (${table.finalVersion} is null or ${table.finalVersion} between 1 and ${table.currentVersion})`),
])
