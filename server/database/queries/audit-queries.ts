import { and, count, desc, eq, gte, lte } from 'drizzle-orm'
import type { Transaction } from '../client'
import { auditEvent } from '../schema/audit-event'
import { userAccount } from '../schema/user-account'

export async function insertAuditEvent(tx: Transaction, event: typeof auditEvent.$inferInsert) {
  await tx.insert(auditEvent).values(event)
}

interface AuditFilter { patientId?: string | undefined, actorId?: string | undefined, from?: string | undefined, to?: string | undefined, page: number, pageSize: number }

export async function listAuditEvents(tx: Transaction, filter: AuditFilter) {
  const where = and(
    filter.patientId ? eq(auditEvent.patientId, filter.patientId) : undefined,
    filter.actorId ? eq(auditEvent.actorId, filter.actorId) : undefined,
    filter.from ? gte(auditEvent.at, new Date(filter.from)) : undefined,
    filter.to ? lte(auditEvent.at, new Date(filter.to)) : undefined,
  )
  const rows = await tx.select({
    id: auditEvent.id, at: auditEvent.at, actorId: auditEvent.actorId, actorName: userAccount.name, action: auditEvent.action,
    targetType: auditEvent.targetType, targetId: auditEvent.targetId, patientId: auditEvent.patientId, requestId: auditEvent.requestId,
    reason: auditEvent.reason, before: auditEvent.before, after: auditEvent.after,
  }).from(auditEvent).leftJoin(userAccount, eq(userAccount.id, auditEvent.actorId)).where(where)
    .orderBy(desc(auditEvent.at), desc(auditEvent.id)).limit(filter.pageSize).offset((filter.page - 1) * filter.pageSize)
  const [sum] = await tx.select({ total: count() }).from(auditEvent).where(where)
  return { rows, total: sum?.total ?? 0 }
}
