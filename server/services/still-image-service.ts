import { Readable } from 'node:stream'
import { media } from '#server/adapters/media'
import { planCut } from '#server/adapters/media-still'
import { storage } from '#server/adapters/storage'
import { findStill, setImageKey } from '#server/database/queries/still-queries'
import type { Actor } from './actor'
import { AppError } from './app-error'
import { changeClinic, readClinic } from './clinic-transaction'
import { eraseObjects, forRequest, stillKey } from './clip-objects'
import { noteView, type StoredAnswer } from './clip-view-service'

type Found = NonNullable<Awaited<ReturnType<typeof findStill>>>

/** Each cut takes a core for a moment: more at once would make every page wait. */
const CUTS_AT_ONCE = 2
let running = 0
const waiting: (() => void)[] = []

async function inTurn<Result>(work: () => Promise<Result>): Promise<Result> {
  if (running >= CUTS_AT_ONCE) await new Promise<void>(resolve => waiting.push(resolve))
  running += 1
  try {
    return await work()
  } finally {
    running -= 1
    waiting.shift()?.()
  }
}

/** Fetches the few stretches of the review copy that the frame needs, and cuts it out of them. */
async function cut({ still, reviewKey, reviewSize, frames }: Found): Promise<Buffer> {
  if (!frames || reviewKey === null || reviewSize === null) throw new AppError('clip-not-ready')
  const plan = planCut({ ...frames, fileSize: reviewSize }, still.frame)
  const stretches = await forRequest(Promise.all(plan.ranges.map(range => storage().read(reviewKey, range))))
  return inTurn(() => media().withFolder(folder => media().cutStill(folder, reviewSize, plan, stretches)))
}

/** Cuts that are being made in this process: two people who open the same still wait for one. */
const underWay = new Map<string, Promise<Buffer>>()

async function cutAndKeep(actor: Actor, found: Found): Promise<Buffer> {
  const { still } = found
  const image = await cut(found)
  const key = stillKey(still.clipId, still.id)
  await forRequest(storage().put(key, image, 'image/png'))
  const isKept = await changeClinic({ clinicId: actor.clinicId, requestId: actor.requestId }, tx => setImageKey(tx, still.id, key))
  // Removed with its clip in the meantime, or kept by another process with the same bytes under the same key.
  if (!isKept && !await readClinic(actor, tx => findStill(tx, actor, still.id))) await forRequest(eraseObjects({ keys: [key] }))
  return image
}

function cutOnce(actor: Actor, found: Found): Promise<Buffer> {
  const { id } = found.still
  const known = underWay.get(id)
  if (known) return known
  const making = cutAndKeep(actor, found).finally(() => underWay.delete(id))
  underWay.set(id, making)
  return making
}

/**
 * The still's frame as PNG in full size: kept from an earlier request, or cut now. Looking at it is noted once in a sign-in.
 * @throws AppError `still-not-found`, `clip-not-ready`, `storage-unavailable`
 */
export async function openStillImage(actor: Actor, stillId: string): Promise<StoredAnswer> {
  const found = await readClinic(actor, tx => findStill(tx, actor, stillId))
  if (!found) throw new AppError('still-not-found')
  const { still } = found
  await noteView(actor, 'still.view', { type: 'still', id: still.id, patientId: still.patientId })
  const common = { status: 200 as const, type: 'image/png', etag: `"still-${still.id}"`, range: null, fileName: `still-${still.id.slice(-8)}.png` }
  const { imageKey } = still
  const kept = imageKey === null ? null : await forRequest(storage().head(imageKey))
  if (imageKey !== null && kept) return { ...common, size: kept.size, open: signal => forRequest(storage().open(imageKey, { signal })) }
  const image = await cutOnce(actor, found)
  return { ...common, size: image.length, open: () => Promise.resolve(Readable.from([image])) }
}
