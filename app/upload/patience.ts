import { toUploadProblem } from './upload-network'
import type { UploadProblem, UploadSurroundings } from './upload-network'

/** Why nothing moves just now. */
export type UploadPause = 'offline' | 'signed-out' | 'retrying'

export interface Patience {
  readonly surroundings: UploadSurroundings
  readonly signal: AbortSignal
  readonly onPause: (why: UploadPause) => void
  /** The network, or the person, is back. */
  readonly onResume: () => void
  /** Failures in a row that are borne; times without a network and without a sign-in do not count. */
  readonly maxFailures: number
}

const FIRST_PAUSE_MS = 1_000
const LONGEST_PAUSE_MS = 30_000

/**
 * How long to wait before the next try: doubling from a second to half a minute, and the second half of it by chance,
 * so that a ward full of tablets does not come back in step.
 * @param failures failures in a row, 1 or more
 * @param random 0 to 1
 */
export function pauseAfter(failures: number, random: number): number {
  const full = Math.min(LONGEST_PAUSE_MS, FIRST_PAUSE_MS * 2 ** (failures - 1))
  return Math.round(full / 2 + (full / 2) * random)
}

/** Whether the same request can succeed later: nothing answered, too many at once, or the other side is in trouble. */
export function isPassing({ status, code }: UploadProblem): boolean {
  return status === 0 || status === 429 || status >= 500 || code === 'request-in-flight' || code === 'address-refused'
}

/**
 * Does `work` until it succeeds: waits while there is no network or nobody is signed in, and backs off after passing failures.
 * @throws UploadProblem what cannot pass, or the last failure when there were too many; the signal's reason when aborted.
 */
export async function persist<Result>(work: () => Promise<Result>, patience: Patience): Promise<Result> {
  const { surroundings, signal } = patience
  for (let failures = 0; ;) {
    signal.throwIfAborted()
    if (!surroundings.isOnline()) {
      patience.onPause('offline')
      await surroundings.whenOnline(signal)
      patience.onResume()
      continue
    }
    try {
      return await work()
    } catch (error) {
      signal.throwIfAborted()
      failures = await bear(toUploadProblem(error), failures, patience)
    }
  }
}

/** @returns the failures in a row, this one counted, after the wait that it asks for. */
async function bear(problem: UploadProblem, failures: number, { surroundings, signal, onPause, onResume, maxFailures }: Patience): Promise<number> {
  if (problem.code === 'not-signed-in') {
    onPause('signed-out')
    await surroundings.whenSignedIn(signal)
    onResume()
    return failures
  }
  if (!isPassing(problem)) throw problem
  // The network going away is no fault of the other side.
  if (!surroundings.isOnline()) return failures
  if (failures >= maxFailures) throw problem
  // One hiccup is not worth a word.
  if (failures >= 1) onPause('retrying')
  await surroundings.wait(Math.max(problem.retryAfterMs ?? 0, pauseAfter(failures + 1, surroundings.random())), signal)
  return failures + 1
}
