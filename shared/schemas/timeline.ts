import { z } from 'zod'
import { ASSISTANCE_LEVELS } from './bout'
import { IdSchema, lineText, MomentSchema } from './common'
import { ReadingSchema } from './reading'

export const TimelineQuerySchema = z.strictObject({
  measure: lineText(60).optional(),
  from: MomentSchema.optional(),
  to: MomentSchema.optional(),
})
export type TimelineQuery = z.infer<typeof TimelineQuerySchema>

/** A reading of the latest version of a final marking; `at` = when the clip was recorded, else the session's start. */
export const TimelineReadingSchema = ReadingSchema.extend({
  id: IdSchema,
  stillId: IdSchema,
  clipId: IdSchema,
  sessionId: IdSchema,
  boutId: IdSchema.nullable(),
  markingVersion: z.number().int(),
  at: z.string(),
  /** Body-weight support of the bout it was taken in, else of the session's bouts when they agree; null when unknown. */
  supportPercent: z.number().nullable(),
})
export type TimelineReading = z.infer<typeof TimelineReadingSchema>

export const TimelineBoutSchema = z.object({
  id: IdSchema,
  sessionId: IdSchema,
  startedAt: z.string(),
  endedAt: z.string().nullable(),
  durationMs: z.number().int().nullable(),
  supportPercent: z.number().nullable(),
  weightOffKg: z.number().nullable(),
  assistance: z.enum(ASSISTANCE_LEVELS),
  helpers: z.number().int().nullable(),
  exertion: z.number().int().nullable(),
  buckles: z.number().int().nullable(),
})
export type TimelineBout = z.infer<typeof TimelineBoutSchema>

export const MILESTONE_KINDS = [
  'first-minute', 'five-minutes', 'first-unsupported-minute', 'support-lowered', 'fewer-helpers', 'less-assistance',
] as const
export const MilestoneSchema = z.object({
  kind: z.enum(MILESTONE_KINDS),
  at: z.string(),
  sessionId: IdSchema,
  boutId: IdSchema,
  /** The new state in a word or number: percent of support, count of helpers, assistance level. */
  to: z.union([z.string(), z.number()]).nullable(),
})
export type Milestone = z.infer<typeof MilestoneSchema>

export const TimelineSchema = z.object({
  readings: z.array(TimelineReadingSchema),
  bouts: z.array(TimelineBoutSchema),
  milestones: z.array(MilestoneSchema),
})
export type Timeline = z.infer<typeof TimelineSchema>
