import { signParts } from '#server/services/clip-upload-service'
import { UploadPartsInputSchema, UploadPartsSchema } from '#shared/schemas/clip'

/** POST /api/clips/:id/upload/parts. Addresses to which the named parts can be put. */
export default defineApiHandler(
  { can: 'clip:write', params: { id: 'clip' }, body: UploadPartsInputSchema, response: UploadPartsSchema },
  ({ actor, params, body }) => signParts(actor, params.id, body.partNumbers),
)
