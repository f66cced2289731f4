import { z } from 'zod'
import { IdSchema, listOf, MomentSchema, PageQuerySchema } from './common'

export const AuditQuerySchema = PageQuerySchema.extend({
  patientId: IdSchema.optional(),
  actorId: IdSchema.optional(),
  from: MomentSchema.optional(),
  to: MomentSchema.optional(),
})
export type AuditQuery = z.infer<typeof AuditQuerySchema>

/** One line of the trail: who did what to which record, when, and for which reason. */
export const AuditEventSchema = z.object({
  id: IdSchema,
  at: z.string(),
  actorId: IdSchema.nullable(),
  actorName: z.string().nullable(),
  action: z.string(),
  targetType: z.string(),
  targetId: z.string().nullable(),
  patientId: IdSchema.nullable(),
  requestId: z.string(),
  reason: z.string().nullable(),
  before: z.unknown(),
  after: z.unknown(),
})
export type AuditEvent = z.infer<typeof AuditEventSchema>
export const AuditListSchema = listOf(AuditEventSchema)
