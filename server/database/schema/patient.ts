import { sql } from 'drizzle-orm'
import { boolean, check, date, index, jsonb, pgTable, real, text, unique, uuid } from 'drizzle-orm/pg-core'
import type { Precaution } from '#shared/schemas/patient'
import { clinic } from './clinic'
import { id, timestamps, version } from './columns'

export const patient = pgTable('patient', {
  id: id(),
  clinicId: uuid().notNull().references(() => clinic.id, { onDelete: 'restrict' }),
  name: text().notNull(),
  recordNumber: text().notNull(),
  birthDate: date({ mode: 'string' }).notNull(),
  weakerSide: text({ enum: ['left', 'right', 'both'] }).notNull(),
  heightCm: real(),
  massKg: real(),
  strokeOn: date({ mode: 'string' }),
  precautions: jsonb().$type<Precaution[]>().notNull().default([]),
  lateropulsion: text({ enum: ['left', 'right'] }),
  neglectSide: text({ enum: ['left', 'right'] }),
  visualFieldLossSide: text({ enum: ['left', 'right'] }),
  hasAphasia: boolean().notNull().default(false),
  notes: text(),
  ...version,
  ...timestamps,
}, table => [
  unique('patient_clinic_id').on(table.clinicId, table.id),
  unique('patient_record_number').on(table.clinicId, table.recordNumber),
  index('patient_by_name').on(table.clinicId, table.name),
  check('patient_name_length', sql`char_length(${table.name}) between 1 and 200`),
  check('patient_record_number_length', sql`char_length(${table.recordNumber}) between 1 and 64`),
  check('patient_birth_date', sql`${table.birthDate} >= '1900-01-01'`),
  check('patient_weaker_side', sql`${table.weakerSide} in ('left', 'right', 'both')`),
  check('patient_sides', sql`coalesce(${table.lateropulsion}, 'left') in ('left', 'right') and coalesce(${table.neglectSide}, 'left') in ('left', 'right') and coalesce(${table.visualFieldLossSide}, 'left') in ('left', 'right')`),
  check('patient_height', sql`${table.heightCm} between 30 and 260`),
  check('patient_mass', sql`${table.massKg} between 2 and 400`),
])
