import { createSession } from '#server/services/session-service'
import { SessionInputSchema, SessionSchema } from '#shared/schemas/session'

/** POST /api/patients/:id/sessions. Starts a session; it keeps the patient's mass of that day. */
export default defineApiHandler(
  { can: 'session:write', params: { id: 'patient' }, body: SessionInputSchema, response: SessionSchema, status: 201 },
  ({ actor, params, body }) => createSession(actor, params.id, body),
)
