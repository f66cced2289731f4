import { z } from 'zod'
import { SideSchema } from './common'

export const VIEWS = ['sagittal', 'frontal-anterior', 'frontal-posterior'] as const
export const ViewSchema = z.enum(VIEWS)
export type View = z.infer<typeof ViewSchema>

/** One value computed from a marking; `low` and `high` bound 95 %. */
export const ReadingSchema = z.object({
  measure: z.string(),
  definitionVersion: z.number().int(),
  view: ViewSchema,
  side: SideSchema.optional(),
  value: z.number(),
  unit: z.string(),
  sd: z.number(),
  low: z.number(),
  high: z.number(),
  targetStatus: z.enum(['within', 'outside', 'unclear']).optional(),
  warnings: z.array(z.string()),
})
export type ReadingJson = z.infer<typeof ReadingSchema>
