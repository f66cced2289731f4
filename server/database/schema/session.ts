import { sql } from 'drizzle-orm'
import { check, foreignKey, index, jsonb, pgTable, real, text, unique, uuid } from 'drizzle-orm/pg-core'
import { id, moment, timestamps, version } from './columns'
import { patient } from './patient'
import { userAccount } from './user-account'

/** One visit: preparation, bouts of standing with rests, a note. */
export const session = pgTable('session', {
  id: id(),
  clinicId: uuid().notNull(),
  patientId: uuid().notNull(),
  startedAt: moment().notNull(),
  notes: text(),
  checklist: jsonb().$type<{ item: string, isDone: boolean, note?: string | undefined }[]>().notNull().default([]),
  /** Body mass of that day, kg: later changes of the chart do not move past percentages. */
  massKg: real(),
  createdById: uuid().notNull(),
  ...version,
  ...timestamps,
}, table => [
  unique('session_clinic_id').on(table.clinicId, table.id),
  unique('session_patient_id').on(table.clinicId, table.patientId, table.id),
  index('session_by_patient').on(table.clinicId, table.patientId, table.startedAt),
  index('session_by_time').on(table.clinicId, table.startedAt),
  foreignKey({ name: 'session_patient', columns: [table.clinicId, table.patientId], foreignColumns: [patient.clinicId, patient.id] }).onDelete('restrict'),
  foreignKey({ name: 'session_author', columns: [table.clinicId, table.createdById], foreignColumns: [userAccount.clinicId, userAccount.id] }).onDelete('restrict'),
  check('session_mass', sql`${table.massKg} between 2 and 400`),
])
