import { giveConsent } from '#server/services/consent-service'
import { ConsentInputSchema, ConsentSchema } from '#shared/schemas/consent'

/** POST /api/patients/:id/consents. Records a consent that was given. */
export default defineApiHandler(
  { can: 'consent:write', params: { id: 'patient' }, body: ConsentInputSchema, response: ConsentSchema, status: 201 },
  ({ actor, params, body }) => giveConsent(actor, params.id, body),
)
