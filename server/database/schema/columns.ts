import { bigint, integer, timestamp, uuid } from 'drizzle-orm/pg-core'

/** A moment: always with a zone. */
export const moment = () => timestamp({ withTimezone: true, precision: 3, mode: 'date' })

/** Primary key: UUIDv7, made by the application (neither Node 20 nor PostgreSQL 15 has one). */
export const id = () => uuid().primaryKey()

/** Sizes in bytes and microseconds go past 2^31. */
export const big = () => bigint({ mode: 'number' })

export const timestamps = {
  createdAt: moment().notNull().defaultNow(),
  updatedAt: moment().notNull().defaultNow(),
}

/** Counts up with each change; compared with `If-Match`. */
export const version = { version: integer().notNull().default(1) }
