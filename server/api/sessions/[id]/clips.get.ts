import { listClipsOfSession } from '#server/services/clip-service'
import { ClipListQuerySchema, ClipListSchema } from '#shared/schemas/clip'

/** GET /api/sessions/:id/clips. The clips of a session, newest first. */
export default defineApiHandler(
  { can: 'clip:read', params: { id: 'session' }, query: ClipListQuerySchema, response: ClipListSchema },
  ({ actor, params, query }) => listClipsOfSession(actor, params.id, query),
)
