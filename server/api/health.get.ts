import { setResponseHeader, setResponseStatus } from 'h3'
import { readHealth } from '#server/services/health-service'
import { HealthSchema } from '#shared/schemas/health'

/** GET /api/health. 200, or 503 while database or storage is away. */
export default defineApiHandler({ can: 'public', response: HealthSchema, ownStatus: true }, async ({ event }) => {
  const health = await readHealth()
  if (health.status === 'down') {
    setResponseStatus(event, 503)
    setResponseHeader(event, 'Retry-After', 5)
  }
  return health
})
