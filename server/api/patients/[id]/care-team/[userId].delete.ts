import { leaveCareTeam } from '#server/services/care-team-service'

/** DELETE /api/patients/:id/care-team/:userId. Takes someone off the care team. */
export default defineApiHandler(
  { can: 'care-team:write', params: { id: 'patient', userId: 'user' }, response: 'none' },
  ({ actor, params }) => leaveCareTeam(actor, params.id, params.userId),
)
