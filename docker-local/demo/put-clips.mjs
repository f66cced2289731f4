import { readFileSync } from 'node:fs'
import { setTimeout as sleep } from 'node:timers/promises'
import { seededRandom } from '../../tests/fixtures/figure/ink.mjs'
import { CLIPS } from './clip-list.mjs'

/** Clips, stills and markings of the scenario, through the real upload and the real job: nothing is put past a check. */

const at = name => new URL(name, import.meta.url)
const TRUTH = JSON.parse(readFileSync(at('truth.json'), 'utf8'))
const CONTENT_TYPES = { mp4: 'video/mp4', mov: 'video/quicktime' }

/** A therapist's hand on the drawn joints: this many px of noise on every point. */
const CLICK_NOISE_PX = 0.5
const POLL_MS = 400
/** Nothing moving for so long means that the worker is gone. */
const STALLED_MS = 240_000

/** Uploads the clips of a chart. @returns what is to be marked once the review copies are ready. */
export async function uploadClips(context, chart) {
  const waiting = []
  for (const { visit, session, bouts } of chart.visits) {
    const api = context.api[visit.by]
    for (const entry of visit.clips ?? []) {
      const clip = await putClip(api, { entry, session, bout: bouts[entry.bout ?? -1], chart })
      waiting.push({ api: context.api[entry.markedBy ?? visit.by], clipId: clip.id, entry })
    }
  }
  return waiting
}

async function putClip(api, { entry, session, bout, chart }) {
  const bytes = readFileSync(at(`clips/${entry.file}`))
  const { items } = await api.get(`/api/sessions/${session.id}/clips?pageSize=200`)
  const known = items.find(item => item.fileName === entry.file && item.status !== 'refused')
  if (known && known.status !== 'uploading') return known
  const { view } = CLIPS[entry.file]
  const clip = known ?? (await api.post(`/api/sessions/${session.id}/clips`, {
    fileName: entry.file,
    size: bytes.length,
    contentType: CONTENT_TYPES[entry.file.split('.').at(-1)],
    view,
    // The people of the demo are filmed from their weaker side.
    ...(view === 'sagittal' ? { side: chart.weakerSide } : {}),
    ...(bout ? { boutId: bout.id } : {}),
    recordedAt: recordedAt(session, bout),
  })).clip
  await putParts(api, clip.id, bytes)
  return clip
}

function recordedAt(session, bout) {
  return bout ? new Date(Date.parse(bout.startedAt) + 25_000).toISOString() : new Date(Date.parse(session.startedAt) + 5 * 60_000).toISOString()
}

async function putParts(api, clipId, bytes) {
  const { partSize, partCount } = await api.get(`/api/clips/${clipId}/upload`)
  const partNumbers = Array.from({ length: partCount }, (_, index) => index + 1)
  const { parts } = await api.post(`/api/clips/${clipId}/upload/parts`, { partNumbers })
  const done = []
  for (const { partNumber, url } of parts) {
    const body = bytes.subarray((partNumber - 1) * partSize, partNumber * partSize)
    const response = await fetch(url, { method: 'PUT', body, signal: AbortSignal.timeout(60_000) })
    if (!response.ok) throw new Error(`the storage refused part ${partNumber} of clip ${clipId}: ${response.status} ${(await response.text()).slice(0, 300)}`)
    done.push({ partNumber, etag: response.headers.get('etag') })
  }
  await api.post(`/api/clips/${clipId}/upload/complete`, { parts: done })
}

/** Waits for the review copies and marks each as soon as it is ready. `onReady(left)` is told how many are still to come. */
export async function markWhenReady(waiting, onReady) {
  const open = new Set(waiting)
  let lastMove = Date.now()
  while (open.size > 0) {
    for (const item of [...open]) {
      const clip = await item.api.get(`/api/clips/${item.clipId}`)
      if (clip.status === 'refused') throw new Error(`the demo clip ${item.entry.file} was refused: ${clip.reason}`)
      if (clip.status !== 'ready') continue
      await markClip(item)
      open.delete(item)
      lastMove = Date.now()
      onReady(open.size)
    }
    if (Date.now() - lastMove > STALLED_MS) throw new Error(`no clip became ready for ${STALLED_MS / 1000} s; ${open.size} are left`)
    if (open.size > 0) await sleep(POLL_MS)
  }
}

async function markClip({ api, clipId, entry }) {
  for (const frame of CLIPS[entry.file].marked) {
    const still = await api.post(`/api/clips/${clipId}/stills`, { frame })
    const { items } = await api.get(`/api/stills/${still.id}/markings`)
    if (items.length === 0) await api.post(`/api/stills/${still.id}/markings`, markingOf(entry, frame, still))
  }
}

/** What the therapist marked: the true points with a little noise, always the same for the same frame. */
export function markingOf(entry, frame, still) {
  const truth = TRUTH[entry.file].stills[frame]
  if (truth.width !== still.width || truth.height !== still.height) throw new Error(`the review copy of ${entry.file} is ${still.width}×${still.height}, it was drawn ${truth.width}×${truth.height}`)
  const random = seededRandom([...entry.file].reduce((sum, letter) => Math.imul(sum, 31) + letter.charCodeAt(0), frame))
  const gaussian = () => Math.sqrt(-2 * Math.log(1 - random())) * Math.cos(2 * Math.PI * random())
  const clicked = (value, limit) => Math.min(limit, Math.max(0, Math.round((value + gaussian() * CLICK_NOISE_PX) * 10) / 10))
  const point = ({ x, y }) => ({ x: clicked(x, truth.width), y: clicked(y, truth.height) })
  return {
    status: entry.status ?? 'final',
    landmarks: Object.fromEntries(Object.entries(truth.landmarks).map(([name, place]) => [name, point(place)])),
    ...(truth.facing ? { facing: truth.facing, side: truth.side } : {}),
    supported: true,
    plumbLine: { top: point(truth.plumbLine.top), bottom: point(truth.plumbLine.bottom) },
    scale: { from: point(truth.scale.from), to: point(truth.scale.to), lengthMm: truth.scale.lengthMm },
  }
}
