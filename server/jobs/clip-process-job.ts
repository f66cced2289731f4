import { z } from 'zod'
import { processClip } from '#server/services/clip-process-service'
import { IdSchema } from '#shared/schemas/common'
import { defineJob } from './job'

/**
 * `clip.process`: makes the review copy of an uploaded clip.
 * One at a time: it uses all cores. Tried three times, then left to the sweep; longest run 60 min (docker-local/queues.json).
 */
export const clipProcessJob = defineJob({
  payload: z.strictObject({ clipId: IdSchema }),
  concurrency: 1,
  pollSeconds: 1,
  run: ({ clipId }, stopping) => processClip(clipId, stopping),
})
