import { listClipsOfPatient } from '#server/services/clip-service'
import { ClipListQuerySchema, ClipListSchema } from '#shared/schemas/clip'

/** GET /api/patients/:id/clips. The clips of a patient, newest first. */
export default defineApiHandler(
  { can: 'clip:read', params: { id: 'patient' }, query: ClipListQuerySchema, response: ClipListSchema },
  ({ actor, params, query }) => listClipsOfPatient(actor, params.id, query),
)
