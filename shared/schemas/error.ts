import { z } from 'zod'

/** Every error that leaves the server. `code` is a stable kebab-case word; the interface switches on it, never on text. */
export const ApiErrorSchema = z.object({
  statusCode: z.number().int(),
  message: z.string(),
  data: z.object({
    code: z.string(),
    requestId: z.string(),
    issues: z.array(z.object({ path: z.string(), message: z.string() })).optional(),
    /** Only with 412: the state that is kept now. */
    current: z.unknown().optional(),
  }),
})
export type ApiError = z.infer<typeof ApiErrorSchema>
