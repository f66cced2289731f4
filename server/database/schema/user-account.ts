import { sql } from 'drizzle-orm'
import { check, foreignKey, index, pgTable, text, unique, uniqueIndex, uuid } from 'drizzle-orm/pg-core'
import type { Role } from '#shared/types/role'
import { clinic } from './clinic'
import { id, moment, timestamps } from './columns'
import { patient } from './patient'

/** One account per person, in one clinic; several roles are possible. */
export const userAccount = pgTable('user_account', {
  id: id(),
  clinicId: uuid().notNull().references(() => clinic.id, { onDelete: 'restrict' }),
  email: text().notNull(),
  name: text().notNull(),
  roles: text().array().$type<Role[]>().notNull(),
  passwordHash: text().notNull(),
  /** The chart of a person who signs in as a patient. */
  patientId: uuid(),
  disabledAt: moment(),
  ...timestamps,
}, table => [
  uniqueIndex('user_account_email').on(sql`lower(${table.email})`),
  unique('user_account_clinic_id').on(table.clinicId, table.id),
  index('user_account_by_clinic').on(table.clinicId, table.name),
  foreignKey({ name: 'user_account_patient', columns: [table.clinicId, table.patientId], foreignColumns: [patient.clinicId, patient.id] }).onDelete('restrict'),
  check('user_account_roles', sql`cardinality(${table.roles}) > 0 and ${table.roles} <@ array['therapist', 'student', 'patient', 'administrator']`),
  check('user_account_patient_role', sql`(${table.patientId} is not null) = ('patient' = any(${table.roles}))`),
  check('user_account_email_form', sql`${table.email} ~ '^[^@[:space:]]+@[^@[:space:]]+$' and char_length(${table.email}) <= 254`),
])
