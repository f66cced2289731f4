import { sql } from 'drizzle-orm'
import { check, foreignKey, integer, jsonb, pgTable, primaryKey, text, uuid } from 'drizzle-orm/pg-core'
import type { MarkingInput } from '#shared/schemas/marking'
import { moment } from './columns'
import { marking } from './marking'
import { userAccount } from './user-account'

/** A version of a marking. Never changed, never deleted (trigger). */
export const markingVersion = pgTable('marking_version', {
  clinicId: uuid().notNull(),
  markingId: uuid().notNull(),
  version: integer().notNull(),
  status: text({ enum: ['draft', 'final'] }).notNull(),
  body: jsonb().$type<Omit<MarkingInput, 'status'>>().notNull(),
  savedById: uuid().notNull(),
  savedAt: moment().notNull().defaultNow(),
}, table => [
  primaryKey({ name: 'marking_version_key', columns: [table.markingId, table.version] }),
  foreignKey({ name: 'marking_version_marking', columns: [table.clinicId, table.markingId], foreignColumns: [marking.clinicId, marking.id] }).onDelete('restrict'),
  foreignKey({ name: 'marking_version_saver', columns: [table.clinicId, table.savedById], foreignColumns: [userAccount.clinicId, userAccount.id] }).onDelete('restrict'),
  check('marking_version_number', sql`${table.version} >= 1`),
  check('marking_version_status', sql`${table.status} in ('draft', 'final')`),
])
