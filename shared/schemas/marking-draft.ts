import { z } from 'zod'
import { SideSchema } from './common'

/*
 * What the browser keeps of a marking that is not saved yet. The shapes follow the document and the commands of the
 * marking model (app/marking); the type check of app/marking/draft.ts holds the two together.
 */
const PointSchema = z.strictObject({ x: z.number(), y: z.number() })
const LandmarkSchema = z.strictObject({ x: z.number(), y: z.number(), sd: z.number().optional() })
const PlumbLineSchema = z.strictObject({ top: PointSchema, bottom: PointSchema })
const ScaleSchema = z.strictObject({ from: PointSchema, to: PointSchema, lengthMm: z.number() })
const StateSchema = z.union([
  z.strictObject({ kind: z.literal('marked'), point: LandmarkSchema }),
  z.strictObject({ kind: z.literal('not-visible'), reason: z.string() }),
  z.null(),
])
const DocumentSchema = z.strictObject({
  landmarks: z.record(z.string(), LandmarkSchema),
  notVisible: z.record(z.string(), z.string()),
  facing: SideSchema.nullable(),
  side: SideSchema.nullable(),
  mirrored: z.boolean(),
  clothed: z.boolean(),
  supported: z.boolean(),
  plumbLine: PlumbLineSchema.nullable(),
  scale: ScaleSchema.nullable(),
})
const SideChange = { from: SideSchema.nullable(), to: SideSchema.nullable() }
const CommandSchema = z.discriminatedUnion('type', [
  z.strictObject({ type: z.literal('landmark.place'), landmark: z.string(), before: StateSchema, point: LandmarkSchema }),
  z.strictObject({ type: z.literal('landmark.move'), landmark: z.string(), from: LandmarkSchema, to: LandmarkSchema }),
  z.strictObject({ type: z.literal('landmark.remove'), landmark: z.string(), point: LandmarkSchema, after: StateSchema }),
  z.strictObject({ type: z.literal('landmark.set-not-visible'), landmark: z.string(), from: StateSchema, to: StateSchema }),
  z.strictObject({ type: z.literal('plumb-line.set'), from: PlumbLineSchema.nullable(), to: PlumbLineSchema.nullable() }),
  z.strictObject({ type: z.literal('plumb-line.move-end'), end: z.enum(['top', 'bottom']), from: PointSchema, to: PointSchema }),
  z.strictObject({ type: z.literal('scale.set'), from: ScaleSchema.nullable(), to: ScaleSchema.nullable() }),
  z.strictObject({ type: z.literal('scale.move-end'), end: z.enum(['from', 'to']), from: PointSchema, to: PointSchema }),
  z.strictObject({
    type: z.literal('circumstance.set'),
    change: z.union([
      z.strictObject({ name: z.literal('facing'), ...SideChange }),
      z.strictObject({ name: z.literal('side'), ...SideChange }),
      z.strictObject({ name: z.enum(['mirrored', 'clothed', 'supported']), from: z.boolean(), to: z.boolean() }),
    ]),
  }),
  z.strictObject({ type: z.literal('document.replace'), from: DocumentSchema, to: DocumentSchema }),
])

/**
 * A draft as the browser keeps it until it is saved: coordinates and opaque ids, no name, no picture.
 * `base` is the saved version that it began from, `null` for a marking that was never saved.
 */
export const MarkingDraftSchema = z.strictObject({
  format: z.literal(1),
  userId: z.string(),
  stillId: z.string(),
  base: z.strictObject({ markingId: z.string(), version: z.number().int() }).nullable(),
  /** Milliseconds since 1970. */
  keptAt: z.number(),
  history: z.strictObject({
    document: DocumentSchema,
    past: z.array(CommandSchema),
    future: z.array(CommandSchema),
    capacity: z.number().int().positive(),
  }),
})
export type MarkingDraft = z.infer<typeof MarkingDraftSchema>
