import { z } from 'zod'
import { IdSchema } from './common'

/** Body of `POST /api/clips/:id/stills`: 0-based, presentation order. */
export const StillInputSchema = z.strictObject({ frame: z.number().int().min(0).max(10_000_000) })
export type StillInput = z.infer<typeof StillInputSchema>

export const StillSchema = z.object({
  id: IdSchema,
  clipId: IdSchema,
  frame: z.number().int(),
  timeUs: z.number().int(),
  width: z.number().int(),
  height: z.number().int(),
})
export type Still = z.infer<typeof StillSchema>

/** `GET /api/clips/:id/stills`: with what is marked on each. */
export const ClipStillSchema = StillSchema.extend({
  markings: z.array(z.object({ id: IdSchema, version: z.number().int(), status: z.enum(['draft', 'final']), author: z.string(), savedAt: z.string() })),
})
export type ClipStill = z.infer<typeof ClipStillSchema>
export const ClipStillsSchema = z.object({ items: z.array(ClipStillSchema) })
