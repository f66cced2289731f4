import { openPoster } from '#server/services/clip-view-service'

/** GET /api/clips/:id/poster. A small picture of the clip, WebP. */
export default defineApiHandler({ can: 'clip:read', params: { id: 'clip' }, response: 'stream' }, async ({ event, actor, params }) => {
  refuseHotlink(event, ['image'])
  return sendStored(event, await openPoster(actor, params.id))
})
