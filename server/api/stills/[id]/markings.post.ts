import { createMarking } from '#server/services/marking-service'
import { MarkingInputSchema, MarkingSchema } from '#shared/schemas/marking'

/** POST /api/stills/:id/markings. Saves one person's marking of a still; answers 201 with its readings. */
export default defineApiHandler(
  { can: 'marking:write', params: { id: 'still' }, body: MarkingInputSchema, response: MarkingSchema, status: 201 },
  ({ actor, params, body }) => createMarking(actor, params.id, body),
)
