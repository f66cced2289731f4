import { boolean, index, pgTable, text } from 'drizzle-orm/pg-core'
import { id, moment } from './columns'

/** Sign-in attempts, also for addresses that have no account, so that the limit tells nothing about who exists. */
export const signInAttempt = pgTable('sign_in_attempt', {
  id: id(),
  /** Lower-cased address as typed. */
  account: text().notNull(),
  at: moment().notNull().defaultNow(),
  isSuccess: boolean().notNull().default(false),
}, table => [index('sign_in_attempt_recent').on(table.account, table.at)])
