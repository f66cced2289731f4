import { openStillImage } from '#server/services/still-image-service'

/** GET /api/stills/:id/image. That very frame in full size, PNG. */
export default defineApiHandler({ can: 'clip:read', params: { id: 'still' }, response: 'stream' }, async ({ event, actor, params }) => {
  refuseHotlink(event, ['image', 'document'])
  return sendStored(event, await openStillImage(actor, params.id))
})
