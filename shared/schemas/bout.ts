import { z } from 'zod'
import { blockText, IdSchema, lineText, MomentSchema } from './common'

/** The six level words of the Section GG item set (US CMS, public domain), most to least able. */
export const ASSISTANCE_LEVELS = ['independent', 'set-up', 'supervision', 'partial', 'substantial', 'dependent'] as const
export type Assistance = typeof ASSISTANCE_LEVELS[number]
export const POSTURES = ['lying', 'sitting', 'standing'] as const
export const BOUT_ENDINGS = ['planned', 'fatigue', 'dizziness', 'pain', 'blood-pressure', 'heart-rate', 'saturation', 'buckling', 'wish', 'other'] as const
export const BOUT_SYMPTOMS = ['dizziness', 'nausea', 'breathlessness', 'chest-pain', 'light-headedness', 'sweating', 'other'] as const
export const BOUT_AIDS = ['quadriceps-stimulation', 'ankle-foot-orthosis', 'knee-orthosis', 'shoulder-support', 'shoes', 'barefoot', 'other'] as const

/** Vital signs with posture and time; mmHg, beats a minute, %. */
export const VitalsSchema = z.strictObject({
  at: MomentSchema,
  posture: z.enum(POSTURES),
  systolic: z.number().int().min(40).max(300).nullish(),
  diastolic: z.number().int().min(20).max(200).nullish(),
  heartRate: z.number().int().min(20).max(250).nullish(),
  spo2: z.number().int().min(50).max(100).nullish(),
}).refine(vitals => [vitals.systolic, vitals.diastolic, vitals.heartRate, vitals.spo2].some(value => value != null), { error: 'vitals-empty' })
  .refine(vitals => vitals.systolic == null || vitals.diastolic == null || vitals.systolic > vitals.diastolic, { error: 'systolic-not-above-diastolic', path: ['systolic'] })
export type Vitals = z.infer<typeof VitalsSchema>

const BoutFieldsSchema = z.strictObject({
  startedAt: MomentSchema,
  endedAt: MomentSchema.nullish(),
  weightOffKg: z.number().min(0).max(400).nullish(),
  assistance: z.enum(ASSISTANCE_LEVELS),
  helpers: z.number().int().min(0).max(6).nullish(),
  armSupport: z.boolean().optional(),
  exertion: z.number().int().min(0).max(10).nullish(),
  vitals: z.array(VitalsSchema).max(40).optional(),
  buckles: z.number().int().min(0).max(200).nullish(),
  pain: z.number().int().min(0).max(10).nullish(),
  symptoms: z.array(z.enum(BOUT_SYMPTOMS)).max(10).optional(),
  loadStrongerKg: z.number().min(0).max(400).nullish(),
  loadWeakerKg: z.number().min(0).max(400).nullish(),
  aids: z.array(z.enum(BOUT_AIDS)).max(10).optional(),
  cues: blockText(1000).nullish(),
  endedBecause: z.enum(BOUT_ENDINGS).nullish(),
  endedNote: lineText(300).nullish(),
})

function endsAfterStart(bout: { startedAt?: string | undefined, endedAt?: string | null | undefined }): boolean {
  return !bout.startedAt || !bout.endedAt || bout.endedAt > bout.startedAt
}

/** Body of `POST /api/sessions/:id/bouts`. Without `endedAt` the bout is running. */
export const BoutInputSchema = BoutFieldsSchema.refine(endsAfterStart, { error: 'end-before-start', path: ['endedAt'] })
export type BoutInput = z.infer<typeof BoutInputSchema>

export const BoutPatchSchema = BoutFieldsSchema.partial()
  .refine(patch => Object.keys(patch).length > 0, { error: 'nothing-to-change' })
  .refine(endsAfterStart, { error: 'end-before-start', path: ['endedAt'] })
export type BoutPatch = z.infer<typeof BoutPatchSchema>

export const BoutSchema = z.object({
  id: IdSchema,
  sessionId: IdSchema,
  patientId: IdSchema,
  startedAt: z.string(),
  endedAt: z.string().nullable(),
  /** Standing time; null while the bout runs. */
  durationMs: z.number().int().nullable(),
  weightOffKg: z.number().nullable(),
  /** Weight off the feet / body mass of that day * 100; null when either is unknown. */
  supportPercent: z.number().nullable(),
  assistance: z.enum(ASSISTANCE_LEVELS),
  helpers: z.number().int().nullable(),
  armSupport: z.boolean(),
  exertion: z.number().int().nullable(),
  vitals: z.array(z.object({
    at: z.string(), posture: z.enum(POSTURES),
    systolic: z.number().nullish(), diastolic: z.number().nullish(), heartRate: z.number().nullish(), spo2: z.number().nullish(),
  })),
  buckles: z.number().int().nullable(),
  pain: z.number().int().nullable(),
  symptoms: z.array(z.enum(BOUT_SYMPTOMS)),
  loadStrongerKg: z.number().nullable(),
  loadWeakerKg: z.number().nullable(),
  /** (stronger - weaker) / (stronger + weaker) * 100, from typed-in scale values only. */
  loadAsymmetryPercent: z.number().nullable(),
  aids: z.array(z.enum(BOUT_AIDS)),
  cues: z.string().nullable(),
  endedBecause: z.enum(BOUT_ENDINGS).nullable(),
  endedNote: z.string().nullable(),
  version: z.number().int(),
})
export type Bout = z.infer<typeof BoutSchema>
