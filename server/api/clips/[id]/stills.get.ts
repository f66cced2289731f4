import { listStillsOfClip } from '#server/services/still-service'
import { ClipStillsSchema } from '#shared/schemas/still'

/** GET /api/clips/:id/stills. The stills of a clip with what is marked on each. */
export default defineApiHandler({ can: 'clip:read', params: { id: 'clip' }, response: ClipStillsSchema }, ({ actor, params }) => listStillsOfClip(actor, params.id))
