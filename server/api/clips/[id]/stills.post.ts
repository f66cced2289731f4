import { pickStill } from '#server/services/still-service'
import { StillInputSchema, StillSchema } from '#shared/schemas/still'

/** POST /api/clips/:id/stills. Picks a frame to be marked; the same frame gives the same still. */
export default defineApiHandler(
  { can: 'still:write', params: { id: 'clip' }, body: StillInputSchema, response: StillSchema, status: 201 },
  ({ actor, params, body }) => pickStill(actor, params.id, body),
)
