import { withdrawConsent } from '#server/services/consent-service'
import { ConsentSchema } from '#shared/schemas/consent'

/** DELETE /api/consents/:id. Withdraws a consent at once; its record stays. */
export default defineApiHandler({ can: 'consent:write', params: { id: 'consent' }, response: ConsentSchema }, ({ actor, params }) => withdrawConsent(actor, params.id))
