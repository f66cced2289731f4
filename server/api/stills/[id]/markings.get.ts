import { listMarkings } from '#server/services/marking-service'
import { MarkingsSchema } from '#shared/schemas/marking'

/** GET /api/stills/:id/markings. The current version of every marking of a still. */
export default defineApiHandler({ can: 'marking:read', params: { id: 'still' }, response: MarkingsSchema }, ({ actor, params }) => listMarkings(actor, params.id))
