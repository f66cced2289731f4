import { inClinic } from '#server/database/client'
import { claimKey, releaseKey } from '#server/database/queries/idempotency-queries'
import type { Actor } from './actor'
import { AppError } from './app-error'

/**
 * Claims an Idempotency-Key of this person on this route.
 * @returns null when the request is the first, else the answer the first one got.
 * @throws AppError `idempotency-mismatch` for another body, `request-in-flight` while the first one runs.
 */
export async function claimRequest(actor: Actor, request: { route: string, key: string, bodyHash: string }): Promise<{ answer: unknown } | null> {
  const kept = await inClinic(actor.clinicId, 'write', tx => claimKey(tx, { clinicId: actor.clinicId, userId: actor.userId, ...request }))
  if (!kept) return null
  if (kept.bodyHash !== request.bodyHash) throw new AppError('idempotency-mismatch')
  if (kept.status === null) throw new AppError('request-in-flight', { retryAfterSeconds: 1 })
  return { answer: kept.answer }
}

/** Gives the key of a failed request back. */
export function releaseRequest(actor: Actor, request: { route: string, key: string }): Promise<void> {
  return inClinic(actor.clinicId, 'write', tx => releaseKey(tx, { userId: actor.userId, ...request }))
}
