import { measureOnly } from '#server/services/marking-service'
import { MeasureAnswerSchema, MeasureInputSchema } from '#shared/schemas/marking'

/** POST /api/measure. The readings of a marking body; nothing is stored. */
export default defineApiHandler({ can: 'measure:compute', body: MeasureInputSchema, response: MeasureAnswerSchema }, ({ actor, body }) => measureOnly(actor, body))
