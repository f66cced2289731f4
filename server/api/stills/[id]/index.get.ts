import { readStill } from '#server/services/still-service'
import { StillSchema } from '#shared/schemas/still'

/** GET /api/stills/:id. Which frame of which clip it is. */
export default defineApiHandler({ can: 'clip:read', params: { id: 'still' }, response: StillSchema }, ({ actor, params }) => readStill(actor, params.id))
