import { z } from 'zod'
import { eraseObjects } from '#server/services/clip-objects'
import { defineJob } from './job'

/** `object.erase`: deletes objects whose rows are gone. Names keys, since nothing else knows them any more. */
export const objectEraseJob = defineJob({
  payload: z.strictObject({ keys: z.array(z.string().min(1)), upload: z.strictObject({ key: z.string().min(1), uploadId: z.string().min(1) }).optional() }),
  concurrency: 1,
  pollSeconds: 2,
  run: payload => eraseObjects(payload),
})
