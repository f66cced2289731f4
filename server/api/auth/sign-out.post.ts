import { setResponseHeader } from 'h3'
import { signOut } from '#server/services/account-service'

/** POST /api/auth/sign-out. Ends the session on the server and clears what the browser holds. */
export default defineApiHandler({ can: 'public', response: 'none' }, async ({ event }) => {
  const [actor, token] = [await readActor(event), await readSessionToken(event)]
  if (actor && token) await signOut(actor, token)
  await clearSessionToken(event)
  setResponseHeader(event, 'Clear-Site-Data', '"cache", "storage"')
})
