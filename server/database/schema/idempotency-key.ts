import { integer, jsonb, pgTable, primaryKey, text, uuid } from 'drizzle-orm/pg-core'
import { moment } from './columns'

/** Answers kept for 24 hours, so that a repeated `POST` has no second effect. */
export const idempotencyKey = pgTable('idempotency_key', {
  clinicId: uuid().notNull(),
  userId: uuid().notNull(),
  route: text().notNull(),
  key: text().notNull(),
  bodyHash: text().notNull(),
  /** Null while the first request is in flight; written in the transaction of its effect. */
  status: integer(),
  answer: jsonb().$type<unknown>(),
  createdAt: moment().notNull().defaultNow(),
}, table => [primaryKey({ name: 'idempotency_key_key', columns: [table.userId, table.route, table.key] })])
