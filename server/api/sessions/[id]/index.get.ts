import { readSession } from '#server/services/session-service'
import { SessionDetailSchema } from '#shared/schemas/session'

/** GET /api/sessions/:id. A session with its bouts. */
export default defineApiHandler({ can: 'session:read', params: { id: 'session' }, response: SessionDetailSchema }, ({ actor, params }) => readSession(actor, params.id))
