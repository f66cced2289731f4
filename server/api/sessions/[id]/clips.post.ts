import { beginUpload } from '#server/services/clip-upload-service'
import { ClipCreatedSchema, ClipInputSchema } from '#shared/schemas/clip'

/** POST /api/sessions/:id/clips. Begins the upload of a clip; answers 201 with the plan of its parts. */
export default defineApiHandler(
  { can: 'clip:write', params: { id: 'session' }, body: ClipInputSchema, response: ClipCreatedSchema, status: 201 },
  ({ actor, params, body }) => beginUpload(actor, params.id, body),
)
