import { joinCareTeam } from '#server/services/care-team-service'
import { CareTeamInputSchema, CareTeamMemberSchema } from '#shared/schemas/patient'

/** POST /api/patients/:id/care-team. Takes a therapist onto the care team. */
export default defineApiHandler(
  { can: 'care-team:write', params: { id: 'patient' }, body: CareTeamInputSchema, response: CareTeamMemberSchema, status: 201 },
  ({ actor, params, body }) => joinCareTeam(actor, params.id, body.userId),
)
