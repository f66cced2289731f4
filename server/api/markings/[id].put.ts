import { saveMarking } from '#server/services/marking-service'
import { MarkingInputSchema, MarkingSchema } from '#shared/schemas/marking'

/** PUT /api/markings/:id. Saves a new version over the one named in If-Match; earlier versions stay. */
export default defineApiHandler(
  { can: 'marking:write', params: { id: 'marking' }, body: MarkingInputSchema, response: MarkingSchema, ifMatch: true },
  ({ actor, params, body, version }) => saveMarking(actor, params.id, version, body),
)
