import { sql } from 'drizzle-orm'
import { boolean, check, foreignKey, index, jsonb, pgTable, real, smallint, text, unique, uuid } from 'drizzle-orm/pg-core'
import type { Assistance, BOUT_AIDS, BOUT_ENDINGS, BOUT_SYMPTOMS, Vitals } from '#shared/schemas/bout'
import { id, moment, timestamps, version } from './columns'
import { session } from './session'

/** One stand. Without `ended_at` it is running. Bouts of one person never overlap (exclusion constraint `bout_no_overlap`). */
export const bout = pgTable('bout', {
  id: id(),
  clinicId: uuid().notNull(),
  patientId: uuid().notNull(),
  sessionId: uuid().notNull(),
  startedAt: moment().notNull(),
  endedAt: moment(),
  weightOffKg: real(),
  assistance: text().$type<Assistance>().notNull(),
  helpers: smallint(),
  armSupport: boolean().notNull().default(false),
  exertion: smallint(),
  vitals: jsonb().$type<Vitals[]>().notNull().default([]),
  buckles: smallint(),
  pain: smallint(),
  symptoms: text().array().$type<typeof BOUT_SYMPTOMS[number][]>().notNull().default([]),
  loadStrongerKg: real(),
  loadWeakerKg: real(),
  aids: text().array().$type<typeof BOUT_AIDS[number][]>().notNull().default([]),
  cues: text(),
  endedBecause: text().$type<typeof BOUT_ENDINGS[number]>(),
  endedNote: text(),
  ...version,
  ...timestamps,
}, table => [
  unique('bout_session_id').on(table.clinicId, table.sessionId, table.id),
  index('bout_by_session').on(table.clinicId, table.sessionId, table.startedAt),
  index('bout_by_patient').on(table.clinicId, table.patientId, table.startedAt),
  foreignKey({ name: 'bout_session', columns: [table.clinicId, table.patientId, table.sessionId], foreignColumns: [session.clinicId, session.patientId, session.id] }).onDelete('restrict'),
  check('bout_order', sql`${table.endedAt} > ${table.startedAt}`),
  check('bout_weight_off', sql`${table.weightOffKg} between 0 and 400`),
  check('bout_loads', sql`${table.loadStrongerKg} between 0 and 400 and ${table.loadWeakerKg} between 0 and 400`),
  check('bout_assistance', sql`${table.assistance} in ('independent', 'set-up', 'supervision', 'partial', 'substantial', 'dependent')`),
  check('bout_helpers', sql`${table.helpers} between 0 and 6`),
  check('bout_exertion', sql`${table.exertion} between 0 and 10`),
  check('bout_pain', sql`${table.pain} between 0 and 10`),
  check('bout_buckles', sql`${table.buckles} between 0 and 200`),
])
