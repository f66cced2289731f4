import { z } from 'zod'
import { blockText, DaySchema, IdSchema, lineText, listOf, PageQuerySchema, SideSchema, sortBy } from './common'
import { ConsentSchema } from './consent'
import { ReadingSchema } from './reading'

export const WEAKER_SIDES = ['left', 'right', 'both'] as const
export const PRECAUTION_KINDS = [
  'weight-bearing-limit', 'shoulder-pain', 'shoulder-subluxation', 'skin-under-supports', 'lines-and-catheters', 'other',
] as const

export const PrecautionSchema = z.strictObject({ kind: z.enum(PRECAUTION_KINDS), note: lineText(300).optional() })
export type Precaution = z.infer<typeof PrecautionSchema>

const today = () => new Date(Date.now() + 14 * 3_600_000).toISOString().slice(0, 10)

const PatientFieldsSchema = z.strictObject({
  name: lineText(200, 1),
  recordNumber: lineText(64, 1),
  birthDate: DaySchema.refine(day => day >= '1900-01-01' && day <= today(), { error: 'birth-date-out-of-range' }),
  weakerSide: z.enum(WEAKER_SIDES),
  heightCm: z.number().min(30).max(260).nullish(),
  massKg: z.number().min(2).max(400).nullish(),
  strokeOn: DaySchema.refine(day => day <= today(), { error: 'day-in-future' }).nullish(),
  precautions: z.array(PrecautionSchema).max(20).optional(),
  lateropulsion: SideSchema.nullish(),
  neglectSide: SideSchema.nullish(),
  visualFieldLossSide: SideSchema.nullish(),
  hasAphasia: z.boolean().optional(),
  notes: blockText(4000).nullish(),
})

/** Body of `POST /api/patients`. Lengths in cm, mass in kg, days without a zone. */
export const PatientInputSchema = PatientFieldsSchema
export type PatientInput = z.infer<typeof PatientInputSchema>

/** Body of `PATCH /api/patients/:id`: any of the fields; `null` empties an optional one. */
export const PatientPatchSchema = PatientFieldsSchema.partial()
  .refine(patch => Object.keys(patch).length > 0, { error: 'nothing-to-change' })
export type PatientPatch = z.infer<typeof PatientPatchSchema>

export const PatientSchema = z.object({
  id: IdSchema,
  name: z.string(),
  recordNumber: z.string(),
  birthDate: z.string(),
  weakerSide: z.enum(WEAKER_SIDES),
  heightCm: z.number().nullable(),
  massKg: z.number().nullable(),
  strokeOn: z.string().nullable(),
  precautions: z.array(PrecautionSchema),
  lateropulsion: SideSchema.nullable(),
  neglectSide: SideSchema.nullable(),
  visualFieldLossSide: SideSchema.nullable(),
  hasAphasia: z.boolean(),
  notes: z.string().nullable(),
  version: z.number().int(),
  createdAt: z.string(),
  updatedAt: z.string(),
})
export type Patient = z.infer<typeof PatientSchema>

export const CareTeamMemberSchema = z.object({ userId: IdSchema, name: z.string(), joinedAt: z.string() })
export type CareTeamMember = z.infer<typeof CareTeamMemberSchema>
export const CareTeamInputSchema = z.strictObject({ userId: IdSchema })

/** What `GET /api/patients/:id` adds for the chart header and the details page. */
export const ChartSchema = PatientSchema.extend({
  careTeam: z.array(CareTeamMemberSchema),
  consents: z.array(ConsentSchema),
  /** How this person came to see the chart; an opening ends at `expiresAt`. */
  access: z.object({ kind: z.enum(['care-team', 'opening']), expiresAt: z.string().nullable() }),
  longestBoutMs: z.number().int().nullable(),
  lastTrunkReading: ReadingSchema.extend({ at: z.string() }).nullable(),
})
export type Chart = z.infer<typeof ChartSchema>

export const PATIENT_SORTS = ['name', 'recordNumber', 'birthDate', 'createdAt', 'lastSessionAt'] as const
export const PatientListQuerySchema = PageQuerySchema.extend({
  search: lineText(200).optional(),
  sort: sortBy(PATIENT_SORTS).default('name'),
})
export type PatientListQuery = z.infer<typeof PatientListQuerySchema>

/** A row of the patient table. */
export const PatientRowSchema = PatientSchema.extend({ lastSessionAt: z.string().nullable(), longestBoutMs: z.number().int().nullable() })
export type PatientRow = z.infer<typeof PatientRowSchema>
export const PatientListSchema = listOf(PatientRowSchema)

/** Stated-reason access: `POST /api/patients/:id/openings`, and by record number `POST /api/openings`. */
export const OpeningInputSchema = z.strictObject({ reason: lineText(500, 10) })
export const OpeningByNumberInputSchema = OpeningInputSchema.extend({ recordNumber: lineText(64, 1) })
export const OpeningSchema = z.object({ id: IdSchema, patientId: IdSchema, reason: z.string(), expiresAt: z.string() })
export type Opening = z.infer<typeof OpeningSchema>
