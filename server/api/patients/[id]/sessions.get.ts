import { findSessions } from '#server/services/session-service'
import { SessionListQuerySchema, SessionListSchema } from '#shared/schemas/session'

/** GET /api/patients/:id/sessions. A patient's sessions, newest first. */
export default defineApiHandler(
  { can: 'session:read', params: { id: 'patient' }, query: SessionListQuerySchema, response: SessionListSchema },
  ({ actor, params, query }) => findSessions(actor, query, params.id),
)
