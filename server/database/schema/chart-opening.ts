import { sql } from 'drizzle-orm'
import { check, foreignKey, index, pgTable, text, uuid } from 'drizzle-orm/pg-core'
import { id, moment } from './columns'
import { patient } from './patient'
import { userAccount } from './user-account'

/** Stated-reason access to a chart by someone outside its care team; it ends by itself. */
export const chartOpening = pgTable('chart_opening', {
  id: id(),
  clinicId: uuid().notNull(),
  patientId: uuid().notNull(),
  userId: uuid().notNull(),
  reason: text().notNull(),
  openedAt: moment().notNull().defaultNow(),
  expiresAt: moment().notNull(),
}, table => [
  index('chart_opening_by_user').on(table.userId, table.patientId, table.expiresAt),
  foreignKey({ name: 'chart_opening_patient', columns: [table.clinicId, table.patientId], foreignColumns: [patient.clinicId, patient.id] }).onDelete('cascade'),
  foreignKey({ name: 'chart_opening_user', columns: [table.clinicId, table.userId], foreignColumns: [userAccount.clinicId, userAccount.id] }).onDelete('cascade'),
  check('chart_opening_reason', sql`char_length(${table.reason}) between 10 and 500`),
  check('chart_opening_span', sql`${table.expiresAt} > ${table.openedAt} and ${table.expiresAt} <= ${table.openedAt} + interval '61 minutes'`),
])
