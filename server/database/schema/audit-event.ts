import { index, jsonb, pgTable, text, uuid } from 'drizzle-orm/pg-core'
import { clinic } from './clinic'
import { id, moment } from './columns'

/** Who did what to which record. Append-only: a trigger refuses UPDATE, DELETE and TRUNCATE, and the serving role holds no such right. */
export const auditEvent = pgTable('audit_event', {
  id: id(),
  clinicId: uuid().notNull().references(() => clinic.id, { onDelete: 'restrict' }),
  at: moment().notNull().defaultNow(),
  actorId: uuid(),
  /** The sign-in it happened in; no key, so that the trail outlives the session row. */
  signInSessionId: uuid(),
  action: text().notNull(),
  targetType: text().notNull(),
  targetId: text(),
  patientId: uuid(),
  requestId: text().notNull(),
  reason: text(),
  before: jsonb().$type<Record<string, unknown> | null>(),
  after: jsonb().$type<Record<string, unknown> | null>(),
}, table => [
  index('audit_event_by_time').on(table.clinicId, table.at),
  index('audit_event_by_patient').on(table.clinicId, table.patientId, table.at),
  index('audit_event_by_actor').on(table.clinicId, table.actorId, table.at),
])
