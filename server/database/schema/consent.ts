import { sql } from 'drizzle-orm'
import { check, date, foreignKey, index, pgTable, text, uuid } from 'drizzle-orm/pg-core'
import { id, moment } from './columns'
import { patient } from './patient'
import { userAccount } from './user-account'

/** A consent and its withdrawal: the row is kept for ever, a trigger lets only the withdrawal be added. */
export const consent = pgTable('consent', {
  id: id(),
  clinicId: uuid().notNull(),
  patientId: uuid().notNull(),
  kind: text({ enum: ['recording', 'teaching', 'sharing'] }).notNull(),
  givenOn: date({ mode: 'string' }).notNull(),
  givenBy: text().notNull(),
  givenByRelation: text({ enum: ['self', 'proxy', 'guardian'] }).notNull(),
  note: text(),
  recordedById: uuid().notNull(),
  createdAt: moment().notNull().defaultNow(),
  withdrawnAt: moment(),
  withdrawnById: uuid(),
}, table => [
  index('consent_in_force').on(table.patientId, table.kind).where(sql`${table.withdrawnAt} is null`),
  foreignKey({ name: 'consent_patient', columns: [table.clinicId, table.patientId], foreignColumns: [patient.clinicId, patient.id] }).onDelete('restrict'),
  foreignKey({ name: 'consent_recorder', columns: [table.clinicId, table.recordedById], foreignColumns: [userAccount.clinicId, userAccount.id] }).onDelete('restrict'),
  foreignKey({ name: 'consent_withdrawer', columns: [table.clinicId, table.withdrawnById], foreignColumns: [userAccount.clinicId, userAccount.id] }).onDelete('restrict'),
  check('consent_kind', sql`${table.kind} in ('recording', 'teaching', 'sharing')`),
  check('consent_relation', sql`${table.givenByRelation} in ('self', 'proxy', 'guardian')`),
  check('consent_given_by', sql`char_length(${table.givenBy}) between 1 and 200`),
  check('consent_withdrawal', sql`(${table.withdrawnAt} is null) = (${table.withdrawnById} is null)`),
])
