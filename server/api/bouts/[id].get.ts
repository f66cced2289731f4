import { readBout } from '#server/services/bout-service'
import { BoutSchema } from '#shared/schemas/bout'

/** GET /api/bouts/:id. One bout. */
export default defineApiHandler({ can: 'session:read', params: { id: 'bout' }, response: BoutSchema }, ({ actor, params }) => readBout(actor, params.id))
