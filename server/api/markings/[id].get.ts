import { readMarking } from '#server/services/marking-service'
import { MarkingSchema, MarkingVersionQuerySchema } from '#shared/schemas/marking'

/** GET /api/markings/:id. The current version, or the one named by `version`. */
export default defineApiHandler(
  { can: 'marking:read', params: { id: 'marking' }, query: MarkingVersionQuerySchema, response: MarkingSchema },
  ({ actor, params, query }) => readMarking(actor, params.id, query.version),
)
