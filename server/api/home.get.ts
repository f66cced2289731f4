import { readHome } from '#server/services/home-service'
import { HomeSchema } from '#shared/schemas/home'

/** GET /api/home. Today, what waits, and the people of this therapist. */
export default defineApiHandler({ can: 'home:read', response: HomeSchema }, ({ actor }) => readHome(actor))
