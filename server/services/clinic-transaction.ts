import { inClinic, type Transaction } from '#server/database/client'
import { keepAnswer } from '#server/database/queries/idempotency-queries'
import type { Actor, ClinicScope } from './actor'

/** Reads in the actor's clinic, in one snapshot that cannot write. */
export function readClinic<Result>(scope: ClinicScope, work: (tx: Transaction) => Promise<Result>): Promise<Result> {
  return inClinic(scope.clinicId, 'read', work)
}

/**
 * Writes in the actor's clinic, all or nothing. Write the audit row inside, with `recordAudit`.
 * The result of the first write of a request with an Idempotency-Key is kept in the same transaction,
 * so a repeat after a lost answer or a killed process gives that answer and no second effect.
 */
export function changeClinic<Result>(scope: ClinicScope | Actor, work: (tx: Transaction) => Promise<Result>): Promise<Result> {
  return inClinic(scope.clinicId, 'write', async (tx) => {
    const result = await work(tx)
    if ('idempotent' in scope && scope.idempotent && !scope.idempotent.isDone) {
      const { route, key, status } = scope.idempotent
      await keepAnswer(tx, { userId: scope.userId, route, key, status, answer: result })
      scope.idempotent.isDone = true
    }
    return result
  })
}
