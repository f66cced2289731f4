import { z } from 'zod'
import { IdSchema } from '#shared/schemas/common'

/**
 * What the browser keeps of an upload that was begun: opaque ids, a hash, and where the browser has them the handle that
 * opens the file again. No name, no picture, no address.
 */
export const KeptUploadSchema = z.object({
  clipId: IdSchema,
  userId: IdSchema,
  fingerprint: z.string().regex(/^[0-9a-f]{64}$/),
  /** Milliseconds since 1970. */
  begunAt: z.number(),
  handle: z.unknown().optional(),
})
export type KeptUpload = z.infer<typeof KeptUploadSchema>

/** The server gives up on an upload that nobody touched; a note of it past this age leads nowhere. */
const LONGEST_KEPT_MS = 7 * 86_400_000

/** @returns the notes that are sound, belong to this person and are not past their time, oldest first. */
export function usableNotes(found: readonly unknown[], userId: string, now: number): KeptUpload[] {
  return found.flatMap((one) => {
    const note = KeptUploadSchema.safeParse(one)
    return note.success && note.data.userId === userId && now - note.data.begunAt < LONGEST_KEPT_MS ? [note.data] : []
  }).sort((a, b) => a.begunAt - b.begunAt)
}
