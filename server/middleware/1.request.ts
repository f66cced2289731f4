import { defineEventHandler, setResponseHeader } from 'h3'
import { uuidv7 } from '#server/adapters/id'
import { settings } from '#server/adapters/settings'
import { AppError } from '#server/services/app-error'

/** Every request has an id, which errors and audit rows carry; what is answered about people is kept by no cache. */
export default defineEventHandler((event) => {
  event.context.requestId = uuidv7()
  setResponseHeader(event, 'X-Request-Id', event.context.requestId)
  if (!event.path.startsWith('/_nuxt/')) setResponseHeader(event, 'Cache-Control', 'no-store')
  if (settings().role === 'worker' && event.path !== '/api/health') throw toApiError(event, new AppError('wrong-role'))
})
