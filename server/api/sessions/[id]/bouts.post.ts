import { addBout } from '#server/services/bout-service'
import { BoutInputSchema, BoutSchema } from '#shared/schemas/bout'

/** POST /api/sessions/:id/bouts. Adds a bout; without an end it is running. */
export default defineApiHandler(
  { can: 'session:write', params: { id: 'session' }, body: BoutInputSchema, response: BoutSchema, status: 201 },
  ({ actor, params, body }) => addBout(actor, params.id, body),
)
