import { readFilmstrip } from '#server/services/clip-view-service'
import { FilmstripSchema } from '#shared/schemas/clip'

/** GET /api/clips/:id/filmstrip.json. How the filmstrip's sprite is laid out. */
export default defineApiHandler({ can: 'clip:read', params: { id: 'clip' }, response: FilmstripSchema }, ({ actor, params }) => readFilmstrip(actor, params.id))
