import { findPatients } from '#server/services/patient-service'
import { PatientListQuerySchema, PatientListSchema } from '#shared/schemas/patient'

/** GET /api/patients. The patients this person may see. */
export default defineApiHandler({ can: 'patient:read', query: PatientListQuerySchema, response: PatientListSchema }, ({ actor, query }) => findPatients(actor, query))
