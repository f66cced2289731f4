import { uuidv7 } from '#server/adapters/id'
import type { Transaction } from '#server/database/client'
import { insertAuditEvent, listAuditEvents } from '#server/database/queries/audit-queries'
import type { AuditEvent, AuditQuery } from '#shared/schemas/audit'
import type { ListOf } from '#shared/schemas/common'
import type { Actor, ClinicScope } from './actor'
import { readClinic } from './clinic-transaction'

export interface AuditTarget { type: string, id: string | null, patientId?: string | null, reason?: string }
type Facts = Record<string, unknown> | null

/**
 * Adds a line to the audit trail, in the caller's transaction: a change and its line exist together or not at all.
 * `before` and `after` hold the facts that changed, no free text of a note.
 */
export async function recordAudit(tx: Transaction, scope: ClinicScope, action: string, target: AuditTarget, before: Facts = null, after: Facts = null): Promise<void> {
  await insertAuditEvent(tx, {
    id: uuidv7(),
    clinicId: scope.clinicId,
    actorId: scope.userId ?? null,
    signInSessionId: scope.sessionId ?? null,
    action,
    targetType: target.type,
    targetId: target.id,
    patientId: target.patientId ?? null,
    requestId: scope.requestId,
    reason: target.reason ?? null,
    before,
    after,
  })
}

/** @returns a page of the clinic's audit trail, newest first. */
export function listAudit(actor: Actor, query: AuditQuery): Promise<ListOf<AuditEvent>> {
  return readClinic(actor, async (tx) => {
    const { rows, total } = await listAuditEvents(tx, query)
    return { items: rows.map(row => ({ ...row, at: row.at.toISOString() })), total, page: query.page, pageSize: query.pageSize }
  })
}
