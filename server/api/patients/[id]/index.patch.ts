import { changePatient } from '#server/services/patient-service'
import { PatientPatchSchema, PatientSchema } from '#shared/schemas/patient'

/** PATCH /api/patients/:id. Changes the version named in If-Match. */
export default defineApiHandler(
  { can: 'patient:write', params: { id: 'patient' }, body: PatientPatchSchema, response: PatientSchema, ifMatch: true },
  ({ actor, params, body, version }) => changePatient(actor, params.id, version, body),
)
