import { randomBytes } from 'node:crypto'
import { sendJob } from '#server/adapters/queue'
import { storage } from '#server/adapters/storage'
import { StorageError } from '#server/adapters/storage-error'
import type { Transaction } from '#server/database/client'
import { AppError } from './app-error'

export const PROCESS_JOB = 'clip.process'
export const ERASE_JOB = 'object.erase'
export const SWEEP_JOB = 'upload.sweep'

/** Where an upload goes: a name that says nothing and that nobody can guess, new for each upload. */
export function newOriginalKey(clipId: string): string {
  return `q/${clipId}/${randomBytes(16).toString('hex')}`
}

/** Where a run of the job puts what it made. Each run has its own place, so that an overtaken one overwrites nothing. */
export function derivedKeys(clipId: string, attempt: number) {
  const place = `m/${clipId}/${attempt}`
  return { review: `${place}/review.mp4`, poster: `${place}/poster.webp`, filmstrip: `${place}/filmstrip.webp` }
}

export function stillKey(clipId: string, stillId: string): string {
  return `m/${clipId}/stills/${stillId}.png`
}

/** @returns everything that runs 1 to `attempt` may have put, but not what is kept. */
export function keysOfRuns(clipId: string, attempt: number, kept: readonly (string | null)[] = []): string[] {
  const runs = Array.from({ length: attempt }, (_, run) => Object.values(derivedKeys(clipId, run + 1))).flat()
  return runs.filter(key => !kept.includes(key))
}

/** Runs an operation of the storage for a request; what it throws becomes an error of the interface. */
export async function forRequest<Result>(work: Promise<Result>): Promise<Result> {
  try {
    return await work
  } catch (error) {
    if (error instanceof StorageError) throw new AppError('storage-unavailable', { retryAfterSeconds: 5, cause: error })
    throw error
  }
}

/** Queues the job that makes the review copy, in the transaction that says the upload is whole. */
export async function queueProcessing(tx: Transaction, clipId: string): Promise<void> {
  await sendJob(tx.$client, PROCESS_JOB, { clipId })
}

/**
 * Has objects deleted once the transaction holds: with the rows gone or changed nothing else knows of them, so the
 * job's payload names them (the one payload that is not ids alone).
 */
export async function queueErasure(tx: Transaction, what: { keys: readonly string[], upload?: { key: string, uploadId: string } }): Promise<void> {
  if (what.keys.length > 0 || what.upload) await sendJob(tx.$client, ERASE_JOB, what)
}

/** Deletes objects and aborts an upload. Those that are gone are no error; safe to run again. */
export async function eraseObjects(what: { keys: readonly string[], upload?: { key: string, uploadId: string } | undefined }): Promise<'done'> {
  if (what.upload) await storage().abortUpload(what.upload)
  for (const key of what.keys) await storage().remove(key)
  return 'done'
}
