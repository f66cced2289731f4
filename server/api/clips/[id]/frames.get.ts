import { readFrames } from '#server/services/clip-view-service'
import { FrameTableSchema } from '#shared/schemas/clip'

/** GET /api/clips/:id/frames. Presentation time of each frame. */
export default defineApiHandler({ can: 'clip:read', params: { id: 'clip' }, response: FrameTableSchema }, ({ actor, params }) => readFrames(actor, params.id))
