import { sql } from 'drizzle-orm'
import { check, jsonb, pgTable, text } from 'drizzle-orm/pg-core'
import { id, timestamps } from './columns'

/** A tenant. Nothing crosses from one clinic to another. */
export const clinic = pgTable('clinic', {
  id: id(),
  name: text().notNull(),
  timeZone: text().notNull().default('UTC'),
  units: text({ enum: ['metric', 'us'] }).notNull().default('metric'),
  /** Targets of the clinic by measure id, over the defaults of the registry: {trunkInclination: {low, high}}. */
  targets: jsonb().$type<Record<string, { low: number, high: number }>>().notNull().default({}),
  ...timestamps,
}, table => [
  check('clinic_name_length', sql`char_length(${table.name}) between 1 and 200`),
  check('clinic_units', sql`${table.units} in ('metric', 'us')`),
])
