import { sql } from 'drizzle-orm'
import { check, doublePrecision, foreignKey, index, integer, pgTable, text, uuid } from 'drizzle-orm/pg-core'
import type { View } from '#shared/schemas/reading'
import { id } from './columns'
import { marking } from './marking'
import { markingVersion } from './marking-version'

/** One value computed by the server from one version of a marking. Never changed (trigger). */
export const reading = pgTable('reading', {
  id: id(),
  clinicId: uuid().notNull(),
  patientId: uuid().notNull(),
  markingId: uuid().notNull(),
  markingVersion: integer().notNull(),
  measure: text().notNull(),
  definitionVersion: integer().notNull(),
  view: text().$type<View>().notNull(),
  side: text({ enum: ['left', 'right'] }),
  value: doublePrecision().notNull(),
  unit: text().notNull(),
  sd: doublePrecision().notNull(),
  low: doublePrecision().notNull(),
  high: doublePrecision().notNull(),
  targetStatus: text({ enum: ['within', 'outside', 'unclear'] }),
  warnings: text().array().notNull().default([]),
}, table => [
  index('reading_by_marking').on(table.markingId, table.markingVersion),
  index('reading_by_patient').on(table.clinicId, table.patientId, table.measure),
  foreignKey({ name: 'reading_marking_version', columns: [table.markingId, table.markingVersion], foreignColumns: [markingVersion.markingId, markingVersion.version] }).onDelete('restrict'),
  foreignKey({ name: 'reading_marking', columns: [table.clinicId, table.patientId, table.markingId], foreignColumns: [marking.clinicId, marking.patientId, marking.id] }).onDelete('restrict'),
  check('reading_band', sql`${table.sd} >= 0 and ${table.low} <= ${table.value} and ${table.value} <= ${table.high}`),
  check('reading_finite', sql`${table.value} <> 'NaN' and abs(${table.value}) <> 'Infinity' and ${table.sd} <> 'NaN' and ${table.sd} <> 'Infinity'`),
])
