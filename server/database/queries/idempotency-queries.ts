import { and, eq, isNull, lt, or, sql } from 'drizzle-orm'
import type { Transaction } from '../client'
import { idempotencyKey } from '../schema/idempotency-key'

interface KeyOfRequest { userId: string, route: string, key: string }

function same(request: KeyOfRequest) {
  return and(eq(idempotencyKey.userId, request.userId), eq(idempotencyKey.route, request.route), eq(idempotencyKey.key, request.key))
}

/**
 * Claims a key. A key older than 24 hours, or one whose first request died in flight over a minute ago, is free again.
 * @returns null when it is ours now, else what is kept under it.
 */
export async function claimKey(tx: Transaction, request: KeyOfRequest & { clinicId: string, bodyHash: string }) {
  const stale = or(
    lt(idempotencyKey.createdAt, sql`now() - interval '24 hours'`),
    and(isNull(idempotencyKey.status), lt(idempotencyKey.createdAt, sql`now() - interval '1 minute'`)),
  )
  await tx.delete(idempotencyKey).where(and(eq(idempotencyKey.userId, request.userId), stale))
  const claimed = await tx.insert(idempotencyKey).values(request).onConflictDoNothing().returning({ key: idempotencyKey.key })
  if (claimed.length > 0) return null
  const [kept] = await tx.select().from(idempotencyKey).where(same(request))
  return kept ?? null
}

/** Keeps the answer under a claimed key. */
export async function keepAnswer(tx: Transaction, request: KeyOfRequest & { status: number, answer: unknown }) {
  await tx.update(idempotencyKey).set({ status: request.status, answer: request.answer }).where(same(request))
}

/** Gives a claimed key back when its request failed: the next try may succeed. */
export async function releaseKey(tx: Transaction, request: KeyOfRequest) {
  await tx.delete(idempotencyKey).where(and(same(request), isNull(idempotencyKey.status)))
}
