import { openWithReason } from '#server/services/opening-service'
import { OpeningInputSchema, OpeningSchema } from '#shared/schemas/patient'

/** POST /api/patients/:id/openings. Opens a chart for an hour with a stated reason; audited. */
export default defineApiHandler(
  { can: 'opening:create', params: { id: 'patient' }, body: OpeningInputSchema, response: OpeningSchema, status: 201 },
  ({ actor, params, body }) => openWithReason(actor, { id: params.id }, body.reason),
)
