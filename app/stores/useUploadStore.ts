import type { Clip, ClipInput } from '#shared/schemas/clip'
import { fingerprintOf, type NamedFile } from '~/upload/fingerprint'
import { CANCEL, runUpload, type UploadTask } from '~/upload/run-upload'
import { createSlotPool } from '~/upload/slot-pool'
import { addSample, rateOf, type RateSample } from '~/upload/transfer-rate'
import { advance, hasEnded, isLeaving, newStatus, type UploadEvent, type UploadStatus } from '~/upload/upload-state'

const PARTS_AT_ONCE = 4

/** An upload as the page shows it. */
export interface UploadEntry {
  readonly id: string
  readonly fileName: string
  readonly sessionId: string
  readonly patientId: string
  readonly clipId: string | null
  readonly status: UploadStatus
  /** Bytes a second over the last moments, null while too little is known. */
  readonly rate: number | null
}

interface Running { file: NamedFile | null, input: ClipInput, samples: RateSample[], stop: AbortController }

/** The uploads of this tab. They outlive the page that began them. */
export const useUploadStore = defineStore('upload', () => {
  const entries = shallowRef<readonly UploadEntry[]>([])
  const session = useSessionStore()
  const running = new Map<string, Running>()
  const slots = createSlotPool(PARTS_AT_ONCE)
  let sessionIdInTurn = ''
  const { network, surroundings } = useUploadNetwork(() => sessionIdInTurn)
  let order = 0
  const isLeavingAny = computed(() => entries.value.some(({ status }) => isLeaving(status)))
  /** Counts up when a clip came, changed its state for good or went: lists read themselves again. */
  const changes = ref(0)

  const find = (id: string) => entries.value.find(entry => entry.id === id)
  function patch(id: string, change: Partial<UploadEntry>) {
    entries.value = entries.value.map(entry => entry.id === id ? { ...entry, ...change } : entry)
  }

  function track(id: string, status: UploadStatus) {
    const run = running.get(id)
    if (!run) return null
    run.samples = status.phase === 'sending' ? addSample(run.samples, { at: Date.now(), bytes: status.sentBytes }) : []
    return rateOf(run.samples)
  }

  async function remember(id: string, clipId: string) {
    const file = running.get(id)?.file
    const userId = session.me?.id
    patch(id, { clipId })
    changes.value += 1
    if (file && userId) await keepUploadNote({ clipId, userId, fingerprint: await fingerprintOf(file), begunAt: Date.now() })
  }

  function report(id: string, event: UploadEvent) {
    const entry = find(id)
    if (!entry) return
    const status = advance(entry.status, event)
    patch(id, { status, rate: track(id, status) })
    if (event.type === 'planned') void remember(id, event.clip.id)
    const clipId = find(id)?.clipId
    // From here on the storage holds the whole file: there is nothing to go on with.
    if (clipId && (event.type === 'followed' || event.type === 'cancelled')) void dropUploadNote(clipId)
    if (hasEnded(status) || (event.type === 'followed' && entry.status.phase !== 'processing')) changes.value += 1
  }

  function run(id: string) {
    const [entry, one] = [find(id), running.get(id)]
    if (!entry || !one?.file) return
    one.stop = new AbortController()
    const task: UploadTask = { file: one.file, input: one.input, idempotencyKey: id, clipId: entry.clipId, order: order++ }
    const own = { ...network, create: (input: ClipInput, key: string) => {
      sessionIdInTurn = entry.sessionId
      return network.create(input, key)
    } }
    void runUpload(task, { network: own, surroundings, slots, report: event => report(id, event) }, one.stop.signal)
  }

  /** Begins to send a file. */
  function start(file: NamedFile, input: ClipInput, place: { sessionId: string, patientId: string }) {
    const id = crypto.randomUUID()
    running.set(id, { file, input, samples: [], stop: new AbortController() })
    entries.value = [...entries.value, { id, fileName: file.name, ...place, clipId: null, status: newStatus(file.size), rate: null }]
    run(id)
  }

  /** Goes on after a failure that did not pass by itself. */
  function retry(id: string) {
    const entry = find(id)
    if (entry?.status.phase === 'stopped') run(id)
  }

  /** Stops an upload and drops what was sent. */
  async function cancel(id: string) {
    const [entry, one] = [find(id), running.get(id)]
    if (entry && isLeaving(entry.status)) return one?.stop.abort(CANCEL)
    if (entry?.clipId) await network.remove(entry.clipId).catch(() => undefined)
    if (entry?.clipId) await dropUploadNote(entry.clipId)
    dismiss(id)
    changes.value += 1
  }

  function dismiss(id: string) {
    running.delete(id)
    entries.value = entries.value.filter(entry => entry.id !== id)
  }

  function addUnfinished(clip: Clip) {
    const input: ClipInput = { fileName: clip.fileName, size: clip.size, contentType: clip.contentType, view: clip.view }
    running.set(clip.id, { file: null, input, samples: [], stop: new AbortController() })
    entries.value = [...entries.value, {
      id: clip.id, fileName: clip.fileName, sessionId: clip.sessionId, patientId: clip.patientId, clipId: clip.id, status: newStatus(clip.size, 'unfinished'), rate: null,
    }]
  }

  /** Finds the uploads that this person began in this browser and that were cut off. */
  async function restore() {
    if (!session.me) return
    for (const note of await readUploadNotes(session.me.id)) {
      if (entries.value.some(entry => entry.clipId === note.clipId)) continue
      const clip = await network.readClip(note.clipId).catch(() => null)
      if (clip?.status === 'uploading') addUnfinished(clip)
      else if (clip) await dropUploadNote(note.clipId)
    }
  }

  /** Goes on with a file that was picked again. @returns whether it is the one that was begun */
  async function goOn(id: string, file: NamedFile): Promise<boolean> {
    const [entry, one] = [find(id), running.get(id)]
    const notes = session.me ? await readUploadNotes(session.me.id) : []
    const note = notes.find(({ clipId }) => clipId === entry?.clipId)
    if (!entry || !one || !note || await fingerprintOf(file) !== note.fingerprint) return false
    one.file = file
    run(id)
    return true
  }

  return { entries, isLeavingAny, changes, start, retry, cancel, dismiss, restore, goOn }
})
