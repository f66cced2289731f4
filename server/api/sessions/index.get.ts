import { findSessions } from '#server/services/session-service'
import { SessionListQuerySchema, SessionListSchema } from '#shared/schemas/session'

/** GET /api/sessions. The sessions of all patients this person may see, newest first. */
export default defineApiHandler({ can: 'session:read', query: SessionListQuerySchema, response: SessionListSchema }, ({ actor, query }) => findSessions(actor, query))
