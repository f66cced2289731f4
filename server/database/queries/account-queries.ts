import { and, asc, count, eq, inArray, isNull, sql } from 'drizzle-orm'
import type { Transaction } from '../client'
import { signInSession } from '../schema/sign-in-session'
import { userAccount } from '../schema/user-account'

/** @returns null when the attempt may go on, else the seconds to wait. */
export async function beginAttempt(tx: Transaction, attempt: { id: string, account: string, limit: number, windowSeconds: number }): Promise<number | null> {
  const result = await tx.execute<{ wait: number | null }>(sql`select auth_begin_attempt(${attempt.id}, ${attempt.account}, ${attempt.limit}, make_interval(secs => ${attempt.windowSeconds})) as wait`)
  return result.rows[0]?.wait ?? null
}

export async function markAttemptSucceeded(tx: Transaction, id: string) {
  await tx.execute(sql`select auth_attempt_succeeded(${id})`)
}

export interface AccountSecret { [column: string]: unknown, id: string, clinic_id: string, password_hash: string, is_disabled: boolean }

export async function findAccountSecret(tx: Transaction, email: string): Promise<AccountSecret | null> {
  const result = await tx.execute<AccountSecret>(sql`select * from auth_account(${email})`)
  return result.rows[0] ?? null
}

export interface SessionRow {
  [column: string]: unknown
  session_id: string
  user_id: string
  clinic_id: string
  name: string
  email: string
  roles: string[]
  patient_id: string | null
  clinic_name: string
  time_zone: string
  units: 'metric' | 'us'
}

export async function findSession(tx: Transaction, tokenHash: Buffer, idleSeconds: number): Promise<SessionRow | null> {
  const result = await tx.execute<SessionRow>(sql`select * from auth_session(${tokenHash}, make_interval(secs => ${idleSeconds}))`)
  return result.rows[0] ?? null
}

export async function revokeSession(tx: Transaction, tokenHash: Buffer) {
  await tx.execute(sql`select auth_revoke_session(${tokenHash})`)
}

export async function insertSession(tx: Transaction, row: { id: string, clinicId: string, userId: string, tokenHash: Buffer, userAgent: string | null, lifetimeSeconds: number }) {
  const { lifetimeSeconds, ...values } = row
  await tx.insert(signInSession).values({ ...values, expiresAt: sql`now() + make_interval(secs => ${lifetimeSeconds})` })
}

/** Keeps the newest `keep` sessions of a person and ends the others. */
export async function endOldSessions(tx: Transaction, userId: string, keep: number) {
  const old = tx.select({ id: signInSession.id }).from(signInSession)
    .where(and(eq(signInSession.userId, userId), isNull(signInSession.revokedAt)))
    .orderBy(sql`${signInSession.createdAt} desc`).offset(keep)
  await tx.update(signInSession).set({ revokedAt: sql`now()` }).where(inArray(signInSession.id, old))
}

export async function findMember(tx: Transaction, userId: string) {
  const [row] = await tx.select({ id: userAccount.id, name: userAccount.name, roles: userAccount.roles, disabledAt: userAccount.disabledAt })
    .from(userAccount).where(eq(userAccount.id, userId))
  return row ?? null
}

export async function listMembers(tx: Transaction, page: { page: number, pageSize: number, role?: string | undefined }) {
  const where = page.role ? sql`${page.role} = any(${userAccount.roles})` : undefined
  const rows = await tx.select({ id: userAccount.id, name: userAccount.name, email: userAccount.email, roles: userAccount.roles, disabledAt: userAccount.disabledAt })
    .from(userAccount).where(where).orderBy(asc(userAccount.name), asc(userAccount.id)).limit(page.pageSize).offset((page.page - 1) * page.pageSize)
  const [sum] = await tx.select({ total: count() }).from(userAccount).where(where)
  return { rows, total: sum?.total ?? 0 }
}
