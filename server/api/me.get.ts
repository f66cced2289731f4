import { toMe } from '#server/services/account-service'
import { MeSchema } from '#shared/schemas/account'

/** GET /api/me. Who is signed in, in which clinic, with which roles. */
export default defineApiHandler({ can: 'signed-in', response: MeSchema }, ({ actor }) => Promise.resolve(toMe(actor)))
