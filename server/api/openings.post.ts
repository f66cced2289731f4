import { openWithReason } from '#server/services/opening-service'
import { OpeningByNumberInputSchema, OpeningSchema } from '#shared/schemas/patient'

/** POST /api/openings. Opens a chart by its record number, with a stated reason; audited. */
export default defineApiHandler(
  { can: 'opening:create', body: OpeningByNumberInputSchema, response: OpeningSchema, status: 201 },
  ({ actor, body }) => openWithReason(actor, { recordNumber: body.recordNumber }, body.reason),
)
