import { openFilmstrip } from '#server/services/clip-view-service'

/** GET /api/clips/:id/filmstrip. Small pictures along the clip in one sprite, WebP; filmstrip.json says how it is laid out. */
export default defineApiHandler({ can: 'clip:read', params: { id: 'clip' }, response: 'stream' }, async ({ event, actor, params }) => {
  refuseHotlink(event, ['image'])
  return sendStored(event, await openFilmstrip(actor, params.id))
})
