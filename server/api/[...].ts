import { handlers } from '#nitro-internal-virtual/server-handlers'
import { AppError } from '#server/services/app-error'

/** Every other address below /api. Without it the page renderer would answer, with a page or a redirect to sign-in. */
export default defineApiHandler({ can: 'public', response: 'none' }, ({ event }) => {
  const methods = allowedMethods(event.path, handlers)
  throw methods.length > 0 ? new AppError('method-not-allowed', { headers: { Allow: methods.join(', ') } }) : new AppError('not-found')
})
