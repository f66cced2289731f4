import { z } from 'zod'
import { ROLES } from '#shared/types/role'
import { IdSchema, lineText, listOf, PageQuerySchema } from './common'

export const SignInInputSchema = z.strictObject({
  email: lineText(254, 3),
  password: z.string().min(1).max(512),
})
export type SignInInput = z.infer<typeof SignInInputSchema>

export const MeSchema = z.object({
  id: IdSchema,
  name: z.string(),
  email: z.string(),
  roles: z.array(z.enum(ROLES)),
  clinic: z.object({ id: IdSchema, name: z.string(), timeZone: z.string(), units: z.enum(['metric', 'us']) }),
  patientId: IdSchema.optional(),
})
export type Me = z.infer<typeof MeSchema>

export const SignInAnswerSchema = z.object({ user: MeSchema })

export const MemberSchema = z.object({
  id: IdSchema,
  name: z.string(),
  email: z.string(),
  roles: z.array(z.enum(ROLES)),
  isDisabled: z.boolean(),
})
export type Member = z.infer<typeof MemberSchema>
export const MemberListSchema = listOf(MemberSchema)

export const MemberListQuerySchema = PageQuerySchema.extend({ role: z.enum(ROLES).optional() })
