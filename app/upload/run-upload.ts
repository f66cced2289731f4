import type { Clip, ClipInput } from '#shared/schemas/clip'
import { missingParts, wholeParts } from './part-plan'
import { persist } from './patience'
import { sendParts } from './send-parts'
import type { SlotPool } from './slot-pool'
import { toUploadProblem, UploadProblem } from './upload-network'
import type { StoredPart, UploadNetwork, UploadPlan, UploadSurroundings } from './upload-network'
import type { UploadEvent } from './upload-state'

export interface UploadTask {
  readonly file: Blob
  /** What the server is told of a new clip; not used when `clipId` names one that was begun. */
  readonly input: ClipInput
  /** The same for every try of this upload, so that a lost answer makes no second clip. */
  readonly idempotencyKey: string
  readonly clipId: string | null
  /** Place among the uploads of the page; lower goes first. */
  readonly order: number
}

export interface UploadTools {
  readonly network: UploadNetwork
  readonly surroundings: UploadSurroundings
  readonly slots: SlotPool
  readonly report: (event: UploadEvent) => void
}

/** Reasons of the signal: `CANCEL` drops what was sent, `LEAVE` keeps it for later. */
export const CANCEL = 'cancel'
export const LEAVE = 'leave'

interface Run extends UploadTools {
  readonly task: UploadTask
  readonly signal: AbortSignal
}

interface Begun { readonly clipId: string, readonly plan: UploadPlan, readonly stored: readonly StoredPart[] }

const MAX_FAILURES = 8
/** The storage may know less than we thought, or know it otherwise: then the rest is sent and joined once more. */
const MAX_ROUNDS = 4
const FIRST_LOOK_MS = 1_000
const LONGEST_LOOK_MS = 10_000

/**
 * Takes a file to the storage and follows the clip until it is ready or refused. Never throws: whatever happens is reported.
 * @param signal aborted with `CANCEL` or `LEAVE`
 */
export async function runUpload(task: UploadTask, tools: UploadTools, signal: AbortSignal): Promise<void> {
  const run: Run = { ...tools, task, signal }
  let clipId = task.clipId
  try {
    tools.report({ type: 'began' })
    const begun = await begin(run, (clip) => { clipId = clip.id })
    const clip = begun ? await sendAndJoin(run, begun) : null
    const id = clipId
    if (id) await followClip(run, clip ?? await readJoined(run, id))
  } catch (error) {
    if (!signal.aborted) tools.report({ type: 'stopped', problem: toUploadProblem(error) })
    else if (signal.reason === CANCEL) await drop(run, clipId)
  }
}

/** Follows a clip whose bytes have all arrived, until it is ready or refused. */
export async function runFollowing(clip: Clip, tools: UploadTools, signal: AbortSignal): Promise<void> {
  try {
    await followClip({ ...tools, signal }, clip)
  } catch (error) {
    if (!signal.aborted) tools.report({ type: 'stopped', problem: toUploadProblem(error) })
  }
}

function ask<Result>({ surroundings, signal, report }: Pick<Run, 'surroundings' | 'signal' | 'report'>, call: () => Promise<Result>, maxFailures = MAX_FAILURES): Promise<Result> {
  return persist(call, { surroundings, signal, maxFailures, onPause: why => report({ type: 'paused', why }), onResume: () => report({ type: 'resumed' }) })
}

/** @returns the plan, and what the storage holds; null when the upload was completed before. */
async function begin(run: Run, onClip: (clip: Clip) => void): Promise<Begun | null> {
  const { task, network, report } = run
  if (task.clipId) return resume(run, task.clipId)
  const { clip, upload: plan } = await ask(run, () => network.create(task.input, task.idempotencyKey))
  onClip(clip)
  report({ type: 'planned', clip, plan, storedBytes: 0 })
  return { clipId: clip.id, plan, stored: [] }
}

async function resume(run: Run, clipId: string): Promise<Begun | null> {
  const { task, network, report } = run
  const clip = await ask(run, () => network.readClip(clipId))
  if (clip.status !== 'uploading') return null
  const { parts, ...plan } = await ask(run, () => network.readUpload(clipId))
  const stored = wholeParts(plan, task.file.size, parts)
  report({ type: 'planned', clip, plan, storedBytes: stored.reduce((sum, part) => sum + part.size, 0) })
  return { clipId, plan, stored }
}

async function sendAndJoin(run: Run, begun: Begun): Promise<Clip | null> {
  const { network, report } = run
  let { stored } = begun
  for (let round = 1; ; round++) {
    try {
      const etags = await sendRest(run, begun, stored)
      report({ type: 'joining' })
      const parts = etags ?? await listEtags(run, begun)
      return await ask(run, () => network.complete(begun.clipId, { parts }))
    } catch (error) {
      run.signal.throwIfAborted()
      const problem = toUploadProblem(error)
      // An earlier call joined them and only its answer was lost, or the upload was dropped meanwhile: the clip says which.
      if (problem.code === 'upload-not-open') return null
      if (!isAboutParts(problem) || round >= MAX_ROUNDS) throw problem
      stored = (await ask(run, () => network.readUpload(begun.clipId))).parts
    }
  }
}

/** @throws UploadProblem `upload-not-open` when the storage does not know the upload and yet nothing was joined */
async function readJoined(run: Run, clipId: string): Promise<Clip> {
  const clip = await ask(run, () => run.network.readClip(clipId))
  if (clip.status === 'uploading') throw new UploadProblem(409, 'upload-not-open')
  return clip
}

function isAboutParts({ code }: UploadProblem): boolean {
  return code === 'part-missing' || code === 'etag-mismatch'
}

/** @returns the entity tags of all parts in order, or null when the storage's answers could not all be read. */
async function sendRest(run: Run, { clipId, plan }: Begun, stored: readonly StoredPart[]) {
  const { task, network, surroundings, slots, signal, report } = run
  const sent = await sendParts({
    clipId, file: task.file, plan, stored, missing: missingParts(plan, task.file.size, stored), network, surroundings, slots, order: task.order, signal,
    onPause: why => report({ type: 'paused', why }),
    onResume: () => report({ type: 'resumed' }),
    onProgress: sentBytes => report({ type: 'moved', sentBytes }),
  })
  const held = new Map(wholeParts(plan, task.file.size, stored).map(part => [part.partNumber, part.etag]))
  const parts = Array.from({ length: plan.partCount }, (_, index) => ({ partNumber: index + 1, etag: sent.get(index + 1) ?? held.get(index + 1) ?? null }))
  const known = parts.flatMap(({ partNumber, etag }) => etag === null ? [] : [{ partNumber, etag }])
  return known.length === parts.length ? known : null
}

async function listEtags(run: Run, { clipId }: Begun) {
  const { parts } = await ask(run, () => run.network.readUpload(clipId))
  return parts.map(({ partNumber, etag }) => ({ partNumber, etag }))
}

/** Looks at the clip now and then, ever more seldom, until there is nothing to wait for. */
async function followClip(run: Pick<Run, 'network' | 'surroundings' | 'signal' | 'report'>, first: Clip): Promise<void> {
  let clip = first
  for (let pause = FIRST_LOOK_MS; ; pause = Math.min(LONGEST_LOOK_MS, pause * 1.5)) {
    run.report({ type: 'followed', clip })
    if (clip.status === 'ready' || clip.status === 'refused') return
    await run.surroundings.wait(pause, run.signal)
    // The server works on without us: however long it does not answer, there is nothing to give up.
    clip = await ask(run, () => run.network.readClip(first.id), Infinity)
  }
}

async function drop({ network, surroundings, report }: Run, clipId: string | null): Promise<void> {
  const { signal } = new AbortController()
  try {
    if (clipId) await persist(() => network.remove(clipId), { surroundings, signal, maxFailures: 3, onPause: () => undefined, onResume: () => undefined })
    report({ type: 'cancelled' })
  } catch (error) {
    const problem = toUploadProblem(error)
    report(problem.status === 404 ? { type: 'cancelled' } : { type: 'stopped', problem })
  }
}
