import type { Readable } from 'node:stream'
import { storage } from '#server/adapters/storage'
import type { Transaction } from '#server/database/client'
import { findClip, findFrameTable, wasNoted, type ClipRow } from '#server/database/queries/clip-queries'
import type { Filmstrip, FrameTable } from '#shared/schemas/clip'
import type { Actor } from './actor'
import { AppError } from './app-error'
import { recordAudit } from './audit-service'
import { mayAnswerRange, readRange } from './byte-range'
import { changeClinic, readClinic } from './clinic-transaction'
import { forRequest } from './clip-objects'

/** What an answer with bytes needs: they are read from `open` only when the answer really begins. */
export interface StoredAnswer {
  status: 200 | 206
  type: string
  etag: string
  size: number
  /** First and last byte of a part, or null for the whole. */
  range: { start: number, end: number } | null
  fileName: string
  open: (signal: AbortSignal) => Promise<Readable>
}

/** What is in the audit trail of this process's sign-ins already; saves a query at each range of a clip. */
const noted = new Set<string>()
const NOTED_LIMIT = 20_000

/**
 * Notes who saw what, once in a sign-in: a clip is fetched in hundreds of ranges.
 * @returns after the line is kept; nothing is shown before
 */
export async function noteView(actor: Actor, action: string, target: { type: string, id: string, patientId: string }): Promise<void> {
  const mark = `${actor.sessionId} ${action} ${target.id}`
  if (noted.has(mark)) return
  await changeClinic(actor, async (tx) => {
    if (!await wasNoted(tx, actor, action, target.id)) await recordAudit(tx, actor, action, target)
  })
  if (noted.size >= NOTED_LIMIT) noted.clear()
  noted.add(mark)
}

type ReadyClip = ClipRow['clip'] & { reviewKey: string, reviewSize: number, posterKey: string, filmstripKey: string, frameCount: number, width: number, height: number }

/** @throws AppError `clip-not-found`, `clip-not-ready` */
export async function findReadyClip(tx: Transaction, actor: Actor, clipId: string): Promise<ReadyClip> {
  const found = await findClip(tx, actor, clipId)
  if (!found) throw new AppError('clip-not-found')
  const { clip } = found
  const { reviewKey, reviewSize, posterKey, filmstripKey, frameCount, width, height } = clip
  const isWhole = reviewKey !== null && reviewSize !== null && posterKey !== null && filmstripKey !== null && frameCount !== null && width !== null && height !== null
  if (clip.status !== 'ready' || !isWhole) throw new AppError('clip-not-ready')
  return { ...clip, reviewKey, reviewSize, posterKey, filmstripKey, frameCount, width, height }
}

/** A tag of the bytes of a run's result: they never change. */
function tagOf(clip: ReadyClip, what: string): string {
  return `"${what}-${clip.id}-${clip.attempt}"`
}

function nameOf(clip: ReadyClip, end: string): string {
  return `clip-${clip.id.slice(-8)}${end}`
}

/**
 * The review copy, or the stretch that `Range` names. The first look of a sign-in is noted before any byte leaves.
 * @throws AppError `clip-not-found`, `clip-not-ready`, `range-not-satisfiable`, `storage-unavailable`
 */
export async function openReview(actor: Actor, clipId: string, headers: { range: string | undefined, ifRange: string | undefined }): Promise<StoredAnswer> {
  const clip = await readClinic(actor, tx => findReadyClip(tx, actor, clipId))
  const etag = tagOf(clip, 'review')
  const range = rangeOf(headers, etag, clip.reviewSize)
  await noteView(actor, 'clip.view', { type: 'clip', id: clip.id, patientId: clip.patientId })
  return {
    status: range ? 206 : 200, type: 'video/mp4', etag, size: clip.reviewSize, range, fileName: nameOf(clip, '.mp4'),
    open: signal => forRequest(storage().open(clip.reviewKey, { signal, ...(range ? { range } : {}) })),
  }
}

function rangeOf(headers: { range: string | undefined, ifRange: string | undefined }, etag: string, size: number) {
  if (!mayAnswerRange(headers.ifRange, etag)) return null
  try {
    return readRange(headers.range, size)
  } catch (cause) {
    throw new AppError('range-not-satisfiable', { headers: { 'Content-Range': `bytes */${size}` }, cause })
  }
}

/** @returns whether this person may see the clip at this moment: an answer that takes long asks again. */
export function maySeeClip(actor: Actor, clipId: string): Promise<boolean> {
  return readClinic(actor, async tx => await findClip(tx, actor, clipId) !== null)
}

async function openPicture(actor: Actor, clipId: string, which: { key: 'posterKey' | 'filmstripKey', name: string, action: string }): Promise<StoredAnswer> {
  const clip = await readClinic(actor, tx => findReadyClip(tx, actor, clipId))
  await noteView(actor, which.action, { type: 'clip', id: clip.id, patientId: clip.patientId })
  const key = clip[which.key]
  const object = await forRequest(storage().head(key))
  if (!object) throw new AppError('clip-not-ready')
  return {
    status: 200, type: 'image/webp', etag: tagOf(clip, which.name), size: object.size, range: null, fileName: nameOf(clip, `-${which.name}.webp`),
    open: signal => forRequest(storage().open(key, { signal })),
  }
}

/** A small picture of the clip. Seeing it is noted as `clip.preview`. @throws as `openReview` */
export function openPoster(actor: Actor, clipId: string): Promise<StoredAnswer> {
  return openPicture(actor, clipId, { key: 'posterKey', name: 'poster', action: 'clip.preview' })
}

/** The sprite of the filmstrip. @throws as `openReview` */
export function openFilmstrip(actor: Actor, clipId: string): Promise<StoredAnswer> {
  return openPicture(actor, clipId, { key: 'filmstripKey', name: 'filmstrip', action: 'clip.view' })
}

/** How the sprite is laid out. @throws AppError `clip-not-found`, `clip-not-ready` */
export function readFilmstrip(actor: Actor, clipId: string): Promise<Filmstrip> {
  return readClinic(actor, async (tx) => {
    const { filmstrip } = await findReadyClip(tx, actor, clipId)
    if (!filmstrip) throw new AppError('clip-not-ready')
    return filmstrip
  })
}

/** Presentation times of the frames, microseconds from the first. @throws AppError `clip-not-found`, `clip-not-ready` */
export function readFrames(actor: Actor, clipId: string): Promise<FrameTable> {
  return readClinic(actor, async (tx) => {
    await findReadyClip(tx, actor, clipId)
    const table = await findFrameTable(tx, clipId)
    if (!table) throw new AppError('clip-not-ready')
    return { timesUs: table.timesUs }
  })
}
