import { createHash } from 'node:crypto'
import { getRequestHeader, type H3Event } from 'h3'
import type { Actor } from '#server/services/actor'
import { AppError } from '#server/services/app-error'
import { claimRequest, releaseRequest } from '#server/services/idempotency-service'

const KEY = /^[\x21-\x7e]{1,200}$/

/**
 * Runs a creating request under its Idempotency-Key, if it carries one: the same key and body gives the first
 * answer again, another body is 422, a twin in flight is 409.
 */
export async function runOnce(event: H3Event, actor: Actor, request: { route: string, status: number, bytes: Buffer }, run: () => Promise<unknown>): Promise<unknown> {
  const key = getRequestHeader(event, 'idempotency-key')
  if (key === undefined) return run()
  if (!KEY.test(key)) throw new AppError('validation-failed', { issues: [{ path: 'Idempotency-Key', message: 'One to 200 printable characters' }] })
  const bodyHash = createHash('sha256').update(request.bytes).digest('hex')
  const kept = await claimRequest(actor, { route: request.route, key, bodyHash })
  if (kept) return kept.answer
  actor.idempotent = { route: request.route, key, status: request.status, isDone: false }
  try {
    return await run()
  } catch (error) {
    if (!actor.idempotent.isDone) await releaseRequest(actor, { route: request.route, key })
    throw error
  }
}
