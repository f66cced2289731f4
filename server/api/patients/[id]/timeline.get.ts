import { readTimeline } from '#server/services/timeline-service'
import { TimelineQuerySchema, TimelineSchema } from '#shared/schemas/timeline'

/** GET /api/patients/:id/timeline. Readings of final markings, bouts and milestones by date. */
export default defineApiHandler(
  { can: 'timeline:read', params: { id: 'patient' }, query: TimelineQuerySchema, response: TimelineSchema },
  ({ actor, params, query }) => readTimeline(actor, params.id, query),
)
