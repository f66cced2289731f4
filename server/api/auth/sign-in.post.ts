import { getRequestHeader } from 'h3'
import { signIn } from '#server/services/account-service'
import { SignInAnswerSchema, SignInInputSchema } from '#shared/schemas/account'

/** POST /api/auth/sign-in. Checks address and password, opens a session and sets its cookie. */
export default defineApiHandler({ can: 'public', body: SignInInputSchema, response: SignInAnswerSchema }, async ({ event, body }) => {
  const priorToken = await readSessionToken(event)
  const { token, me } = await signIn(body, { requestId: event.context.requestId, userAgent: getRequestHeader(event, 'user-agent') ?? null, priorToken })
  await writeSessionToken(event, token)
  return { user: me }
})
