import { logger } from '#server/adapters/logger'
import { claimClip, extendRun, findClipForJob, releaseRun, type ClipRun } from '#server/database/queries/clip-queries'
import { hasConsent } from '#server/database/queries/patient-queries'
import type { ClinicScope } from './actor'
import { changeClinic } from './clinic-transaction'

/** A run that has not been heard of for this long is taken for dead. */
const LEASE_SECONDS = 60
const BEAT_MS = 5_000
const PROGRESS_EVERY_MS = 1_000
/** Runs in which the tools died: after the second the clip is refused. */
export const MAX_CRASHES = 2
/** Runs of any kind: storage or database that stay away for hours use them up. */
export const MAX_ATTEMPTS = 50

type ClipToProcess = NonNullable<Awaited<ReturnType<typeof claimClip>>>

/** Another run took the clip over, or it is gone: this one must change nothing more. */
export class RunOvertaken extends Error {
  override name = 'RunOvertaken'
}

/** @returns the clip for this run and whether it may be worked on, or null when another run has it or it is done. */
export function beginRun(scope: ClinicScope, clipId: string): Promise<{ clip: ClipToProcess, hasConsent: boolean } | null> {
  return changeClinic(scope, async (tx) => {
    if (!await findClipForJob(tx, clipId)) return null
    const clip = await claimClip(tx, clipId, LEASE_SECONDS)
    return clip ? { clip, hasConsent: await hasConsent(tx, clip.patientId, 'recording') } : null
  })
}

/**
 * Keeps a run's lease and shows its progress. `signal` aborts when the run was overtaken or the process stops.
 * Call `end` in every case.
 */
export function watchRun(scope: ClinicScope, run: ClipRun, stopping: AbortSignal) {
  const overtaken = new AbortController()
  let progress = 0
  let shownAt = 0
  let writing: Promise<void> = Promise.resolve()

  async function beat(): Promise<void> {
    shownAt = Date.now()
    try {
      const isOurs = await changeClinic(scope, tx => extendRun(tx, run, progress, LEASE_SECONDS))
      if (!isOurs) overtaken.abort(new RunOvertaken(run.clipId))
    } catch (error) {
      // A database that is away for a moment is no reason to lose the work; the lease decides.
      logger.warn({ err: error, clipId: run.clipId }, 'the progress of a clip could not be written')
    }
  }

  function write(): void {
    writing = writing.then(beat)
  }

  const timer = setInterval(write, BEAT_MS)
  return {
    signal: AbortSignal.any([overtaken.signal, stopping]),
    /** @param share 0 to 1, never falls */
    show(share: number): void {
      progress = Math.max(progress, Math.min(1, share))
      if (Date.now() - shownAt >= PROGRESS_EVERY_MS) write()
    },
    async end(): Promise<void> {
      clearInterval(timer)
      await writing
    },
  }
}
export type RunWatch = ReturnType<typeof watchRun>

/** Gives the clip back for another run. @returns how often its tools have died so far */
export function giveBack(scope: ClinicScope, run: ClipRun, isCrash: boolean): Promise<number> {
  return changeClinic(scope, tx => releaseRun(tx, run, isCrash))
}
