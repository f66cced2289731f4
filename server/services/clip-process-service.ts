import { createWriteStream } from 'node:fs'
import { open } from 'node:fs/promises'
import { join } from 'node:path'
import { Transform } from 'node:stream'
import { pipeline } from 'node:stream/promises'
import { uuidv7 } from '#server/adapters/id'
import { logger } from '#server/adapters/logger'
import { FILMSTRIP_NAME, INPUT_NAME, media, MediaRefusal, POSTER_NAME, REVIEW_NAME, type Survey } from '#server/adapters/media'
import { MediaCrash } from '#server/adapters/media-cage'
import { planPicture, type ReviewPlan } from '#server/adapters/media-review'
import { storage } from '#server/adapters/storage'
import { withoutClinic } from '#server/database/client'
import { findClinicOfClip, type ClipRow } from '#server/database/queries/clip-queries'
import type { ClipRefusal } from '#shared/schemas/clip'
import type { ClinicScope } from './actor'
import { HEAD_BYTES, judgeFacts, judgeFrames, looksLikeVideo, MAX_CLIP_SECONDS, MAX_FRAMES } from './clip-limits'
import { derivedKeys, eraseObjects } from './clip-objects'
import { finishClip, refuseClip } from './clip-outcome'
import { beginRun, giveBack, MAX_ATTEMPTS, MAX_CRASHES, RunOvertaken, watchRun, type RunWatch } from './clip-run'

type ClipToProcess = ClipRow['clip']

/** The clip is at fault; the run ends with this reason. */
class Refused extends Error {
  constructor(readonly reason: ClipRefusal) {
    super(reason)
  }
}

/** Where in the progress each stage ends. */
const STAGE = { fetched: 0.05, encoded: 0.82, surveyed: 0.95 }
/** A little past the limits, so that a clip that goes on is seen to go on. */
const STOP_AT = { seconds: MAX_CLIP_SECONDS + 1, frames: MAX_FRAMES + 1 }

function refuseIf(reason: ClipRefusal | null): void {
  if (reason) throw new Refused(reason)
}

/** Fetches the upload into the folder: the size that was declared, not a byte more. */
async function fetchOriginal(clip: ClipToProcess, folder: string, watch: RunWatch): Promise<void> {
  const object = await storage().head(clip.originalKey)
  if (!object) throw new Refused('could-not-process')
  refuseIf(object.size === clip.size ? null : 'size-mismatch')
  let size = 0
  const counted = new Transform({
    transform(chunk: Buffer, _encoding, done) {
      size += chunk.length
      watch.show(STAGE.fetched * size / clip.size)
      done(size > clip.size ? new Refused('size-mismatch') : null, chunk)
    },
  })
  const path = join(folder, INPUT_NAME)
  await pipeline(await storage().open(clip.originalKey, { signal: watch.signal }), counted, createWriteStream(path, { mode: 0o644 }), { signal: watch.signal })
  const file = await open(path)
  try {
    const { buffer, bytesRead } = await file.read(Buffer.alloc(HEAD_BYTES), 0, HEAD_BYTES, 0)
    refuseIf(looksLikeVideo(buffer.subarray(0, bytesRead)) ? null : 'not-a-video')
  } finally {
    await file.close()
  }
}

interface Made { plan: ReviewPlan, survey: Survey }

/** Makes review copy, poster and filmstrip in the folder, and judges what really decoded. */
async function makeCopies(clip: ClipToProcess, folder: string, watch: RunWatch): Promise<Made> {
  const facts = await media().probe(folder)
  refuseIf(judgeFacts(facts))
  const { video } = facts
  if (!video) throw new Refused('no-picture')
  const plan = planPicture(video)
  const expectedSeconds = facts.duration ?? MAX_CLIP_SECONDS
  // The tools died the last time: once more with one thread, which is the simpler way through them.
  const isCareful = clip.crashes > 0
  await media().makeReview(folder, { video, plan }, { ...STOP_AT, expectedSeconds, isCareful }, {
    signal: watch.signal,
    onProgress: ({ seconds }) => watch.show(STAGE.fetched + (STAGE.encoded - STAGE.fetched) * Math.min(1, seconds / expectedSeconds)),
  })
  watch.show(STAGE.encoded)
  const survey = await media().survey(folder, plan, expectedSeconds, watch.signal)
  const { timesUs, durationUs } = survey.list
  refuseIf(judgeFrames({ count: timesUs.length, lastUs: timesUs.at(-1) ?? 0, durationUs }))
  watch.show(STAGE.surveyed)
  return { plan, survey }
}

async function keepCopies(clip: ClipToProcess, folder: string) {
  const keys = derivedKeys(clip.id, clip.attempt)
  await storage().put(keys.review, { path: join(folder, REVIEW_NAME) }, 'video/mp4')
  await storage().put(keys.poster, { path: join(folder, POSTER_NAME) }, 'image/webp')
  await storage().put(keys.filmstrip, { path: join(folder, FILMSTRIP_NAME) }, 'image/webp')
  return { keys, reviewSize: (await storage().head(keys.review))?.size ?? 0 }
}

async function work(scope: ClinicScope, clip: ClipToProcess, watch: RunWatch): Promise<boolean> {
  return media().withFolder(async (folder) => {
    await fetchOriginal(clip, folder, watch)
    const { plan, survey } = await makeCopies(clip, folder, watch)
    const { keys, reviewSize } = await keepCopies(clip, folder)
    return finishClip(scope, clip, { keys, reviewSize, width: plan.width, height: plan.height, survey })
  })
}

/** @returns the reason to refuse the clip for, or null when the run shall be tried again. */
async function judgeFailure(scope: ClinicScope, clip: ClipToProcess, error: unknown): Promise<ClipRefusal | null> {
  if (error instanceof Refused || error instanceof MediaRefusal) return error.reason
  const isCrash = error instanceof MediaCrash
  const crashes = clip.crashes + (isCrash ? 1 : 0)
  if (crashes >= MAX_CRASHES || clip.attempt >= MAX_ATTEMPTS) return 'could-not-process'
  await giveBack(scope, { clipId: clip.id, attempt: clip.attempt }, isCrash)
  return null
}

async function attempt(scope: ClinicScope, clip: ClipToProcess, stopping: AbortSignal): Promise<'done' | 'skipped'> {
  const watch = watchRun(scope, { clipId: clip.id, attempt: clip.attempt }, stopping)
  const startedAt = Date.now()
  try {
    const isOurs = await work(scope, clip, watch)
    logger.info({ clipId: clip.id, attempt: clip.attempt, ms: Date.now() - startedAt, isOurs }, 'clip processed')
    return isOurs ? 'done' : 'skipped'
  } catch (error) {
    await watch.end()
    if (error instanceof RunOvertaken || watch.signal.reason instanceof RunOvertaken) {
      await eraseObjects({ keys: Object.values(derivedKeys(clip.id, clip.attempt)) })
      return 'skipped'
    }
    const reason = await judgeFailure(scope, clip, error)
    if (!reason) throw error
    logger.info({ clipId: clip.id, attempt: clip.attempt, reason, err: error }, 'clip refused')
    return await refuseClip(scope, clip, reason) ? 'done' : 'skipped'
  } finally {
    await watch.end()
  }
}

/**
 * Makes the review copy of an uploaded clip, or refuses the clip with a reason. Safe to run twice and at once: a run
 * holds the clip by a lease and writes only as long as it is the latest.
 * @param stopping aborts when the process is asked to stop; the clip is given back then
 * @throws what went wrong when the job shall be tried again
 */
export async function processClip(clipId: string, stopping: AbortSignal): Promise<'done' | 'skipped'> {
  const clinicId = await withoutClinic(tx => findClinicOfClip(tx, clipId))
  if (!clinicId) return 'skipped'
  const scope: ClinicScope = { clinicId, requestId: uuidv7() }
  const begun = await beginRun(scope, clipId)
  if (!begun) return 'skipped'
  if (!begun.hasConsent) return await refuseClip(scope, begun.clip, 'consent-withdrawn') ? 'done' : 'skipped'
  return attempt(scope, begun.clip, stopping)
}
