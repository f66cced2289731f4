import { createPatient } from '#server/services/patient-service'
import { PatientInputSchema, PatientSchema } from '#shared/schemas/patient'

/** POST /api/patients. Creates a patient; who creates joins the care team. */
export default defineApiHandler({ can: 'patient:write', body: PatientInputSchema, response: PatientSchema, status: 201 }, ({ actor, body }) => createPatient(actor, body))
