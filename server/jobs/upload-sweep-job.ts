import { z } from 'zod'
import { sweepClips } from '#server/services/clip-sweep-service'
import { defineJob } from './job'

/** `upload.sweep`: drops uploads that were left and queues clips again whose job was lost. */
export const uploadSweepJob = defineJob({
  payload: z.strictObject({}),
  concurrency: 1,
  pollSeconds: 10,
  everySeconds: 600,
  run: () => sweepClips(),
})
