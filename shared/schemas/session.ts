import { z } from 'zod'
import { blockText, IdSchema, lineText, listOf, MomentSchema, PageQuerySchema } from './common'
import { BoutSchema } from './bout'

/** One answer of the preparation list: the item, whether it holds, and what was typed beside it. */
export const ChecklistAnswerSchema = z.strictObject({ item: lineText(200, 1), isDone: z.boolean(), note: lineText(300).optional() })

export const SessionInputSchema = z.strictObject({
  startedAt: MomentSchema,
  notes: blockText(8000).optional(),
  checklist: z.array(ChecklistAnswerSchema).max(60).optional(),
})
export type SessionInput = z.infer<typeof SessionInputSchema>

export const SessionPatchSchema = z.strictObject({
  startedAt: MomentSchema.optional(),
  notes: blockText(8000).nullable().optional(),
  checklist: z.array(ChecklistAnswerSchema).max(60).optional(),
}).refine(patch => Object.keys(patch).length > 0, { error: 'nothing-to-change' })
export type SessionPatch = z.infer<typeof SessionPatchSchema>

export const SessionSchema = z.object({
  id: IdSchema,
  patientId: IdSchema,
  startedAt: z.string(),
  notes: z.string().nullable(),
  checklist: z.array(ChecklistAnswerSchema),
  /** Body mass of that day, kg: the base of every support percentage of the session. */
  massKg: z.number().nullable(),
  createdBy: z.string(),
  version: z.number().int(),
})
export type Session = z.infer<typeof SessionSchema>

/** A row of a session list. */
export const SessionRowSchema = SessionSchema.extend({
  patientName: z.string(),
  boutCount: z.number().int(),
  isRunning: z.boolean(),
  longestBoutMs: z.number().int().nullable(),
  totalBoutMs: z.number().int(),
  supportPercent: z.number().nullable(),
  assistance: z.string().nullable(),
  helpers: z.number().int().nullable(),
  clipCount: z.number().int(),
})
export type SessionRow = z.infer<typeof SessionRowSchema>
export const SessionListSchema = listOf(SessionRowSchema)
export const SessionListQuerySchema = PageQuerySchema.extend({ from: MomentSchema.optional(), to: MomentSchema.optional() })
export type SessionListQuery = z.infer<typeof SessionListQuerySchema>

/** `GET /api/sessions/:id`. */
export const SessionDetailSchema = SessionSchema.extend({ patientName: z.string(), bouts: z.array(BoutSchema) })
export type SessionDetail = z.infer<typeof SessionDetailSchema>
