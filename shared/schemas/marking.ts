import { z } from 'zod'
import { IdSchema, lineText, SideSchema } from './common'
import { ReadingSchema, ViewSchema } from './reading'

export const MAX_LANDMARKS = 64

const PointSchema = z.strictObject({ x: z.number(), y: z.number() })
const LandmarkSchema = PointSchema.extend({ sd: z.number().positive().max(1000).optional() })
const LandmarkNameSchema = z.string().regex(/^[a-zA-Z][a-zA-Z0-9]{0,39}$/)

function atMost(limit: number) {
  return (map: Record<string, unknown>) => Object.keys(map).length <= limit
}

/**
 * A marking: one person's landmarks, plumb line and scale on one still. Picture pixels of the review copy,
 * origin top left, y down, fractions allowed. Which names exist and whether they lie in the picture is
 * checked by the measuring core, which names the landmark at fault.
 */
export const MarkingBodySchema = z.strictObject({
  landmarks: z.record(LandmarkNameSchema, LandmarkSchema).refine(atMost(MAX_LANDMARKS), { error: 'too-many-landmarks' }),
  notVisible: z.record(LandmarkNameSchema, lineText(200)).refine(atMost(MAX_LANDMARKS), { error: 'too-many-landmarks' }).optional(),
  facing: SideSchema.optional(),
  side: SideSchema.optional(),
  mirrored: z.boolean().optional(),
  clothed: z.boolean().optional(),
  supported: z.boolean().optional(),
  plumbLine: z.strictObject({ top: PointSchema, bottom: PointSchema }).optional(),
  scale: z.strictObject({ from: PointSchema, to: PointSchema, lengthMm: z.number().positive().max(20_000) }).optional(),
})
export const MarkingInputSchema = MarkingBodySchema.extend({ status: z.enum(['draft', 'final']) })
export type MarkingInput = z.infer<typeof MarkingInputSchema>

/** Body of `POST /api/measure`: a marking body and the picture it lies on; nothing is stored. */
export const MeasureInputSchema = MarkingBodySchema.extend({
  status: z.enum(['draft', 'final']).optional(),
  view: ViewSchema,
  width: z.number().int().min(1).max(20_000),
  height: z.number().int().min(1).max(20_000),
})
export type MeasureInput = z.infer<typeof MeasureInputSchema>
export const MeasureAnswerSchema = z.object({ readings: z.array(ReadingSchema) })

/** One version of a marking as kept. */
export const MarkingSchema = z.object({
  id: IdSchema,
  stillId: IdSchema,
  version: z.number().int(),
  status: z.enum(['draft', 'final']),
  author: z.object({ id: IdSchema, name: z.string() }),
  savedAt: z.string(),
  body: MarkingBodySchema,
  readings: z.array(ReadingSchema),
})
export type Marking = z.infer<typeof MarkingSchema>
export const MarkingsSchema = z.object({ items: z.array(MarkingSchema) })
/** `GET /api/markings/:id`: an earlier version by `version`. */
export const MarkingVersionQuerySchema = z.strictObject({ version: z.coerce.number().int().min(1).max(2_147_483_647).optional() })
