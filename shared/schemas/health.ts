import { z } from 'zod'

const CheckSchema = z.enum(['up', 'down', 'not-configured'])
/** `GET /api/health`: 200 with `ok` or `degraded` (queue or mail away), 503 with `down` (database or storage away). */
export const HealthSchema = z.object({
  status: z.enum(['ok', 'degraded', 'down']),
  mode: z.enum(['demo', 'production']),
  checks: z.object({ database: CheckSchema, storage: CheckSchema, queue: CheckSchema, mail: CheckSchema }),
})
export type Health = z.infer<typeof HealthSchema>
