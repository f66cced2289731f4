import { removeClip } from '#server/services/clip-service'

/** DELETE /api/clips/:id. Cancels an upload, or removes a clip that carries no marking. */
export default defineApiHandler({ can: 'clip:write', params: { id: 'clip' }, response: 'none' }, ({ actor, params }) => removeClip(actor, params.id))
