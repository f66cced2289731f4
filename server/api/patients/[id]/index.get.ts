import { openChart } from '#server/services/patient-service'
import { ChartSchema } from '#shared/schemas/patient'

/** GET /api/patients/:id. The chart; opening it is audited. */
export default defineApiHandler({ can: 'patient:read', params: { id: 'patient' }, response: ChartSchema }, ({ actor, params }) => openChart(actor, params.id))
