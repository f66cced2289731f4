import { z } from 'zod'
import { blockText, DaySchema, IdSchema, lineText } from './common'

export const CONSENT_KINDS = ['recording', 'teaching', 'sharing'] as const
export const CONSENT_RELATIONS = ['self', 'proxy', 'guardian'] as const

/** Body of `POST /api/patients/:id/consents`: who gave what, when. */
export const ConsentInputSchema = z.strictObject({
  kind: z.enum(CONSENT_KINDS),
  givenOn: DaySchema,
  givenBy: lineText(200, 1),
  givenByRelation: z.enum(CONSENT_RELATIONS).default('self'),
  note: blockText(1000).optional(),
})
export type ConsentInput = z.infer<typeof ConsentInputSchema>

/** A consent as kept: withdrawing it never deletes the record. */
export const ConsentSchema = z.object({
  id: IdSchema,
  patientId: IdSchema,
  kind: z.enum(CONSENT_KINDS),
  givenOn: z.string(),
  givenBy: z.string(),
  givenByRelation: z.enum(CONSENT_RELATIONS),
  note: z.string().nullable(),
  recordedBy: z.string(),
  createdAt: z.string(),
  withdrawnAt: z.string().nullable(),
  withdrawnBy: z.string().nullable(),
})
export type Consent = z.infer<typeof ConsentSchema>
