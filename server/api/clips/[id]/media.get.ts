import { getRequestHeader } from 'h3'
import { maySeeClip, openReview } from '#server/services/clip-view-service'

/** GET /api/clips/:id/media. The review copy, whole or the stretch that `Range` names. */
export default defineApiHandler({ can: 'clip:read', params: { id: 'clip' }, response: 'stream' }, async ({ event, actor, params }) => {
  refuseHotlink(event, ['video'])
  const answer = await openReview(actor, params.id, { range: getRequestHeader(event, 'range'), ifRange: getRequestHeader(event, 'if-range') })
  return sendStored(event, answer, async () => await isSignedInStill(event) && maySeeClip(actor, params.id))
})
