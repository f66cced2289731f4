import { sql } from 'drizzle-orm'
import { check, customType, foreignKey, index, pgTable, text, unique, uuid } from 'drizzle-orm/pg-core'
import { id, moment } from './columns'
import { userAccount } from './user-account'

const bytea = customType<{ data: Buffer }>({ dataType: () => 'bytea' })

/** What stands behind the cookie. Revoking the row ends the session at the next request. */
export const signInSession = pgTable('sign_in_session', {
  id: id(),
  clinicId: uuid().notNull(),
  userId: uuid().notNull(),
  /** SHA-256 of the 256-bit token; the token itself is nowhere but in the person's cookie. */
  tokenHash: bytea().notNull(),
  createdAt: moment().notNull().defaultNow(),
  lastSeenAt: moment().notNull().defaultNow(),
  expiresAt: moment().notNull(),
  revokedAt: moment(),
  userAgent: text(),
}, table => [
  unique('sign_in_session_token').on(table.tokenHash),
  index('sign_in_session_by_user').on(table.userId),
  foreignKey({ name: 'sign_in_session_user', columns: [table.clinicId, table.userId], foreignColumns: [userAccount.clinicId, userAccount.id] }).onDelete('cascade'),
  check('sign_in_session_hash_length', sql`octet_length(${table.tokenHash}) = 32`),
])
