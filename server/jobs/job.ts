import type { z } from 'zod'

/** A job as a file of this folder declares it: its payload (ids only), how it runs, and what it does. */
export interface Job<Payload extends z.ZodType = z.ZodType> {
  payload: Payload
  /** How many run at once in one process. */
  concurrency: number
  pollSeconds: number
  /** How often the worker queues it by itself; absent for jobs that others queue. */
  everySeconds?: number
  /** Re-reads what it works on, is safe to run twice. @param stopping aborts when the process is asked to stop */
  run: (payload: z.output<Payload>, stopping: AbortSignal) => Promise<'done' | 'skipped'>
}

/** Keeps the payload's type while the job is declared. */
export function defineJob<Payload extends z.ZodType>(job: Job<Payload>): Job<Payload> {
  return job
}
