import { ERASE_JOB, PROCESS_JOB, SWEEP_JOB } from '#server/services/clip-objects'
import { MAIL_JOB } from '#server/services/mail-service'
import { clipProcessJob } from './clip-process-job'
import { mailSendJob } from './mail-send-job'
import { objectEraseJob } from './object-erase-job'
import { uploadSweepJob } from './upload-sweep-job'
import type { z } from 'zod'
import type { Job } from './job'

/** A job whose payload was not checked yet. */
export interface RunnableJob extends Pick<Job, 'concurrency' | 'pollSeconds' | 'everySeconds'> {
  run: (payload: unknown, stopping: AbortSignal) => Promise<'done' | 'skipped'>
}

function checked<Payload extends z.ZodType>({ payload, run, ...job }: Job<Payload>): RunnableJob {
  return { ...job, run: (given, stopping) => run(payload.parse(given), stopping) }
}

/** Name of the queue to what takes its jobs. The queues are made by the deploy step from docker-local/queues.json. */
export const JOBS: Readonly<Record<string, RunnableJob>> = {
  [PROCESS_JOB]: checked(clipProcessJob),
  [SWEEP_JOB]: checked(uploadSweepJob),
  [ERASE_JOB]: checked(objectEraseJob),
  [MAIL_JOB]: checked(mailSendJob),
}
