import { listAudit } from '#server/services/audit-service'
import { AuditListSchema, AuditQuerySchema } from '#shared/schemas/audit'

/** GET /api/audit. The clinic's audit trail, newest first; administrators only. */
export default defineApiHandler({ can: 'audit:read', query: AuditQuerySchema, response: AuditListSchema }, ({ actor, query }) => listAudit(actor, query))
