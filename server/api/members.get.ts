import { findMembers } from '#server/services/member-service'
import { MemberListQuerySchema, MemberListSchema } from '#shared/schemas/account'

/** GET /api/members. The people of the clinic; a therapist sees the therapists, to build care teams. */
export default defineApiHandler({ can: 'member:read', query: MemberListQuerySchema, response: MemberListSchema }, ({ actor, query }) => findMembers(actor, query))
