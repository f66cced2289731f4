import { changeSession } from '#server/services/session-service'
import { SessionPatchSchema, SessionSchema } from '#shared/schemas/session'

/** PATCH /api/sessions/:id. Changes the version named in If-Match. */
export default defineApiHandler(
  { can: 'session:write', params: { id: 'session' }, body: SessionPatchSchema, response: SessionSchema, ifMatch: true },
  ({ actor, params, body, version }) => changeSession(actor, params.id, version, body),
)
