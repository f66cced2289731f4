import { z } from 'zod'
import { IdSchema } from './common'
import { ReadingSchema } from './reading'
import { WEAKER_SIDES } from './patient'
import { SessionRowSchema } from './session'

/** Something that waits for the therapist. */
export const HomeNeedSchema = z.object({
  kind: z.enum(['clip-unmarked', 'clip-refused', 'clip-processing', 'clip-uploading', 'marking-draft']),
  patientId: IdSchema,
  patientName: z.string(),
  clipId: IdSchema,
  stillId: IdSchema.nullable(),
  reason: z.string().nullable(),
  at: z.string(),
})
export type HomeNeed = z.infer<typeof HomeNeedSchema>

/** A row of "Your people": trunk inclination over time, longest bout, change since the first reading at like support. */
export const HomePersonSchema = z.object({
  patientId: IdSchema,
  name: z.string(),
  weakerSide: z.enum(WEAKER_SIDES),
  trunk: z.array(ReadingSchema.extend({ at: z.string(), supportPercent: z.number().nullable() })),
  longestBoutMs: z.number().int().nullable(),
  clipCount: z.number().int(),
})
export type HomePerson = z.infer<typeof HomePersonSchema>

/** `GET /api/home`: today in the clinic's time zone. */
export const HomeSchema = z.object({
  today: z.array(SessionRowSchema),
  needs: z.array(HomeNeedSchema),
  people: z.array(HomePersonSchema),
})
export type Home = z.infer<typeof HomeSchema>
