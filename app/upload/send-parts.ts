import { createPartAddresses } from './part-addresses'
import { partLength, partRange, wholeParts } from './part-plan'
import { persist, type UploadPause } from './patience'
import type { SlotPool } from './slot-pool'
import { toUploadProblem, UploadProblem } from './upload-network'
import type { StoredPart, UploadNetwork, UploadPlan, UploadSurroundings } from './upload-network'

export interface SendOptions {
  readonly clipId: string
  readonly file: Blob
  readonly plan: UploadPlan
  /** Numbers of the parts to send, in order. */
  readonly missing: readonly number[]
  /** Parts that are there already: they count in the progress and are never sent again. */
  readonly stored: readonly StoredPart[]
  readonly network: UploadNetwork
  readonly surroundings: UploadSurroundings
  readonly slots: SlotPool
  /** Place among the uploads of the page; lower goes first. */
  readonly order: number
  readonly signal: AbortSignal
  readonly onPause: (why: UploadPause) => void
  readonly onResume: () => void
  /** Bytes of the file that are in the storage or on their way. */
  readonly onProgress: (bytes: number) => void
}

/** Enough for a storage that is away for some minutes; after it the person is asked. */
const MAX_FAILURES = 8

/**
 * Sends the missing parts, as many at a time as there are places.
 * @returns the entity tags of all parts that were sent; null where the storage's answer was not readable.
 * @throws UploadProblem the first failure that does not pass; the signal's reason when aborted.
 */
export async function sendParts(options: SendOptions): Promise<Map<number, string | null>> {
  const { missing, slots, order, signal } = options
  // One part that cannot be sent ends the others too.
  const stop = new AbortController()
  const forward = () => stop.abort(signal.reason)
  signal.throwIfAborted()
  signal.addEventListener('abort', forward, { once: true })
  const send = createPartSender({ ...options, signal: stop.signal })
  const etags = new Map<number, string | null>()
  const jobs: Promise<void>[] = []
  try {
    for (const partNumber of missing) {
      const release = await slots.take(order, stop.signal)
      jobs.push(send(partNumber)
        .then((etag) => { etags.set(partNumber, etag) }, (error: unknown) => { stop.abort(error) })
        .finally(release))
    }
    await Promise.all(jobs)
    stop.signal.throwIfAborted()
    return etags
  } finally {
    await Promise.all(jobs)
    signal.removeEventListener('abort', forward)
  }
}

/** Sends one part until the storage holds it. @returns its entity tag. */
function createPartSender(options: SendOptions) {
  const { clipId, file, plan, missing, network, surroundings, signal, onPause, onResume } = options
  const addresses = createPartAddresses({ wanted: missing, sign: partNumbers => network.signParts(clipId, partNumbers), now: surroundings.now })
  const progress = createProgress(options)
  const readStored = shareCall(() => network.readUpload(clipId))

  async function put(partNumber: number, bytes: Blob): Promise<string | null> {
    const url = await addresses.of(partNumber)
    if (!url) throw new UploadProblem(0, 'address-refused')
    try {
      return await network.putPart(url, bytes, { signal, onProgress: sent => progress.moved(partNumber, sent) })
    } catch (error) {
      progress.moved(partNumber, 0)
      throw error
    } finally {
      addresses.forget(partNumber)
    }
  }

  /** An address can run out between its signing and its use: a refused one is made anew once before it counts as a failure. */
  async function putWithFreshAddress(partNumber: number, bytes: Blob): Promise<string | null> {
    try {
      return await put(partNumber, bytes)
    } catch (error) {
      const problem = toUploadProblem(error)
      if (problem.code !== 'address-refused') throw await explain(problem, bytes)
      return put(partNumber, bytes)
    }
  }

  return async function send(partNumber: number): Promise<string | null> {
    const { start, end } = partRange(plan, file.size, partNumber)
    const bytes = file.slice(start, end)
    let mayBeStored = false
    const etag = await persist(async () => {
      // The answer may have been lost on its way and not the part.
      if (mayBeStored) {
        const held = wholeParts(plan, file.size, (await readStored()).parts).find(part => part.partNumber === partNumber)
        if (held) return held.etag
      }
      mayBeStored = true
      return putWithFreshAddress(partNumber, bytes)
    }, { surroundings, signal, onPause, onResume, maxFailures: MAX_FAILURES })
    progress.moved(partNumber, partLength(plan, file.size, partNumber))
    return etag
  }
}

/** No answer can also mean that the file was changed, moved or that its card was pulled: then trying again is in vain. */
async function explain(problem: UploadProblem, bytes: Blob): Promise<UploadProblem> {
  if (problem.status !== 0) return problem
  try {
    await bytes.slice(0, 1).arrayBuffer()
    return problem
  } catch (cause) {
    return new UploadProblem(-1, 'file-changed', null, { cause })
  }
}

function createProgress({ file, plan, stored, onProgress }: SendOptions) {
  const held = wholeParts(plan, file.size, stored).reduce((sum, part) => sum + part.size, 0)
  const moving = new Map<number, number>()
  return {
    moved(partNumber: number, bytes: number) {
      // The browser counts what it has handed on, never more than the part.
      moving.set(partNumber, Math.min(bytes, partLength(plan, file.size, partNumber)))
      onProgress([...moving.values()].reduce((sum, part) => sum + part, held))
    },
  }
}

/** Several who ask at the same moment get one answer. */
function shareCall<Result>(call: () => Promise<Result>): () => Promise<Result> {
  let running: Promise<Result> | null = null
  return () => {
    running ??= call().finally(() => { running = null })
    return running
  }
}
