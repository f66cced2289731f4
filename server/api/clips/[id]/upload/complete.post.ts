import { completeUpload } from '#server/services/clip-completion-service'
import { ClipAnswerSchema, UploadCompleteInputSchema } from '#shared/schemas/clip'

/** POST /api/clips/:id/upload/complete. Ends an upload; answers 202, the review copy is made after that. */
export default defineApiHandler(
  { can: 'clip:write', params: { id: 'clip' }, body: UploadCompleteInputSchema, response: ClipAnswerSchema, status: 202 },
  ({ actor, params, body }) => completeUpload(actor, params.id, body),
)
