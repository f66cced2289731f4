import type { Survey } from '#server/adapters/media'
import { endRun, insertFrameTable, type ClipRow } from '#server/database/queries/clip-queries'
import { hasConsent } from '#server/database/queries/patient-queries'
import type { ClipRefusal } from '#shared/schemas/clip'
import type { ClinicScope } from './actor'
import { recordAudit } from './audit-service'
import { changeClinic } from './clinic-transaction'
import { meanFrameRate } from './clip-limits'
import { type derivedKeys, eraseObjects, keysOfRuns, queueErasure } from './clip-objects'

type Clip = ClipRow['clip']

/**
 * Refuses a clip: the row says why, and every byte of it goes.
 * @returns false when the run was overtaken: then nothing was changed
 */
export function refuseClip(scope: ClinicScope, clip: Clip, reason: ClipRefusal): Promise<boolean> {
  return changeClinic(scope, async (tx) => {
    const isOurs = await endRun(tx, { clipId: clip.id, attempt: clip.attempt }, { status: 'refused', reason, progress: 0 })
    if (!isOurs) return false
    await queueErasure(tx, { keys: [clip.originalKey, ...keysOfRuns(clip.id, clip.attempt)] })
    await recordAudit(tx, scope, 'clip.refuse', { type: 'clip', id: clip.id, patientId: clip.patientId }, { status: 'processing' }, { status: 'refused', reason })
    return true
  })
}

export interface ClipResult { keys: ReturnType<typeof derivedKeys>, reviewSize: number, width: number, height: number, survey: Survey }

/**
 * Makes a clip ready, when consent still stands and this run is still the latest. The original stays, unserved, until
 * the clinic has a rule for how long; what earlier runs left goes.
 * @returns false when the run was overtaken: then what it put is deleted
 */
export async function finishClip(scope: ClinicScope, clip: Clip, result: ClipResult): Promise<boolean> {
  const { list, filmstrip } = result.survey
  const facts = { count: list.timesUs.length, lastUs: list.timesUs.at(-1) ?? 0, durationUs: list.durationUs }
  const { keys } = result
  const outcome = await changeClinic(scope, async (tx) => {
    if (!await hasConsent(tx, clip.patientId, 'recording')) return 'no-consent'
    const isOurs = await endRun(tx, { clipId: clip.id, attempt: clip.attempt }, {
      status: 'ready', progress: 1, reviewKey: keys.review, reviewSize: result.reviewSize, posterKey: keys.poster, filmstripKey: keys.filmstrip, filmstrip,
      width: result.width, height: result.height, frameCount: facts.count, frameRate: meanFrameRate(facts), durationMs: Math.round(facts.durationUs / 1000),
    })
    if (!isOurs) return 'overtaken'
    await insertFrameTable(tx, { clipId: clip.id, clinicId: clip.clinicId, timesUs: list.timesUs, keyFrames: list.keyFrames, keyOffsets: list.keyOffsets })
    await queueErasure(tx, { keys: keysOfRuns(clip.id, clip.attempt, Object.values(keys)) })
    await recordAudit(tx, scope, 'clip.ready', { type: 'clip', id: clip.id, patientId: clip.patientId }, { status: 'processing' }, { status: 'ready', frameCount: facts.count, width: result.width, height: result.height })
    return 'ready'
  })
  if (outcome === 'no-consent') return refuseClip(scope, clip, 'consent-withdrawn')
  if (outcome === 'overtaken') await eraseObjects({ keys: Object.values(keys) })
  return outcome === 'ready'
}
