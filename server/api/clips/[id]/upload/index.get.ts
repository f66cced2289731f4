import { readUpload } from '#server/services/clip-upload-service'
import { UploadStateSchema } from '#shared/schemas/clip'

/** GET /api/clips/:id/upload. The plan and the parts that are there, to go on after a break. */
export default defineApiHandler({ can: 'clip:write', params: { id: 'clip' }, response: UploadStateSchema }, ({ actor, params }) => readUpload(actor, params.id))
