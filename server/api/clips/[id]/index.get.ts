import { readClip } from '#server/services/clip-service'
import { ClipSchema } from '#shared/schemas/clip'

/** GET /api/clips/:id. A clip and how far it is. */
export default defineApiHandler({ can: 'clip:read', params: { id: 'clip' }, response: ClipSchema }, ({ actor, params }) => readClip(actor, params.id))
