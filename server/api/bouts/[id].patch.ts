import { changeBout } from '#server/services/bout-service'
import { BoutPatchSchema, BoutSchema } from '#shared/schemas/bout'

/** PATCH /api/bouts/:id. Corrects or ends the bout of the version named in If-Match. */
export default defineApiHandler(
  { can: 'session:write', params: { id: 'bout' }, body: BoutPatchSchema, response: BoutSchema, ifMatch: true },
  ({ actor, params, body, version }) => changeBout(actor, params.id, version, body),
)
