import { z } from 'zod'
import { SideSchema } from '#shared/schemas/common'
import type { MarkingCommand } from './commands/marking-command'
import type { MarkingHistory } from './history'

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
const CommandSchema: z.ZodType<MarkingCommand> = z.discriminatedUnion('type', [
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
const DraftSchema = z.strictObject({
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
export type MarkingDraft = z.infer<typeof DraftSchema>

/** What is kept beside the history. */
export type DraftOrigin = Pick<MarkingDraft, 'userId' | 'stillId' | 'base' | 'keptAt'>

/** @returns the draft as text; undo and redo go with it. */
export function writeDraft(origin: DraftOrigin, history: MarkingHistory): string {
  const draft: Readonly<Omit<MarkingDraft, 'history'>> & { readonly history: MarkingHistory } = { format: 1, ...origin, history }
  return JSON.stringify(draft)
}

/** @returns the draft, or `null` when the text is none of ours, of another format, or another person's. */
export function readDraft(text: string, owner: Pick<DraftOrigin, 'userId' | 'stillId'>): MarkingDraft | null {
  const parsed = DraftSchema.safeParse(parseJson(text))
  if (!parsed.success) return null
  return parsed.data.userId === owner.userId && parsed.data.stillId === owner.stillId ? parsed.data : null
}

function parseJson(text: string): unknown {
  try {
    return JSON.parse(text)
  } catch {
    // Not JSON is one of the ways in which a text is no draft.
    return null
  }
}

const KEY_PREFIX = 'standmark.draft.'

/** @returns the name under which the draft of one person on one still is kept. */
export function draftKey(userId: string, stillId: string): string {
  return `${KEY_PREFIX}${userId}.${stillId}`
}

/** @returns whether a storage key is a draft's; with `userId`, whether it is that person's. */
export function isDraftKey(key: string, userId?: string): boolean {
  return key.startsWith(userId === undefined ? KEY_PREFIX : `${KEY_PREFIX}${userId}.`)
}
