import type { Clip, ClipInput } from '#shared/schemas/clip'
import { fingerprintOf, type NamedFile } from '~/upload/fingerprint'
import type { KeptUpload } from '~/upload/kept-upload'
import { CANCEL, LEAVE, runUpload, type UploadTask } from '~/upload/run-upload'
import { createSlotPool } from '~/upload/slot-pool'
import { addSample, rateOf, type RateSample } from '~/upload/transfer-rate'
import { toUploadProblem } from '~/upload/upload-network'
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

/** A file on its way: `fingerprint` tells it again, `handle` opens it again where the browser has such a thing. */
export interface UploadFile { readonly file: NamedFile, readonly fingerprint: string, readonly handle: FileSystemFileHandle | null }

interface Running {
  file: NamedFile | null
  fingerprint: string
  handle: FileSystemFileHandle | null
  input: ClipInput
  samples: RateSample[]
  stop: AbortController
}

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
    run.samples = status.phase === 'sending' && !status.pause ? addSample(run.samples, { at: Date.now(), bytes: status.sentBytes }) : []
    return rateOf(run.samples)
  }

  function remember(id: string, clipId: string) {
    const [one, userId] = [running.get(id), session.me?.id]
    patch(id, { clipId })
    changes.value += 1
    if (one && userId) void keepUploadNote({ clipId, userId, fingerprint: one.fingerprint, begunAt: Date.now(), ...(one.handle ? { handle: one.handle } : {}) })
  }

  function report(id: string, event: UploadEvent) {
    const entry = find(id)
    if (!entry) return
    const status = advance(entry.status, event)
    patch(id, { status, rate: track(id, status) })
    if (event.type === 'planned' && !entry.clipId) remember(id, event.clip.id)
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
    const work: Promise<void> = runUpload(task, { network: own, surroundings, slots, report: (event) => {
      report(id, event)
      if (event.type === 'planned') void holdUpload(event.clip.id, work)
    } }, one.stop.signal)
  }

  /** Begins to send a file. */
  function start({ file, fingerprint, handle }: UploadFile, input: ClipInput, place: { sessionId: string, patientId: string }) {
    const id = crypto.randomUUID()
    running.set(id, { file, fingerprint, handle, input, samples: [], stop: new AbortController() })
    entries.value = [...entries.value, { id, fileName: file.name, ...place, clipId: null, status: newStatus(file.size), rate: null }]
    run(id)
  }

  /** Goes on after a failure that did not pass by itself. */
  function retry(id: string) {
    const [entry, one] = [find(id), running.get(id)]
    if (entry?.status.phase !== 'stopped') return
    if (one && entry.status.problem?.code === 'file-changed') one.file = null
    if (one?.file) run(id)
    else patch(id, { status: newStatus(entry.status.totalBytes, 'unfinished') })
  }

  /** Stops an upload and drops what was sent. */
  async function cancel(id: string) {
    const [entry, one] = [find(id), running.get(id)]
    if (!entry) return
    if (isLeaving(entry.status)) return one?.stop.abort(CANCEL)
    try {
      if (entry.clipId) await network.remove(entry.clipId)
    } catch (error) {
      const problem = toUploadProblem(error)
      // What is not there any more needs no removing.
      if (problem.status !== 404) return patch(id, { status: { ...entry.status, phase: 'stopped', problem } })
    }
    if (entry.clipId) await dropUploadNote(entry.clipId)
    dismiss(id)
    changes.value += 1
  }

  function dismiss(id: string) {
    running.delete(id)
    entries.value = entries.value.filter(entry => entry.id !== id)
  }

  /** The person has signed out: nothing is sent any more, and nothing stays in the browser. */
  function leave() {
    for (const one of running.values()) one.stop.abort(LEAVE)
    running.clear()
    entries.value = []
    void wipeUploadNotes()
  }

  function addUnfinished(clip: Clip, { fingerprint, handle }: KeptUpload) {
    const input: ClipInput = { fileName: clip.fileName, size: clip.size, contentType: clip.contentType, view: clip.view }
    running.set(clip.id, { file: null, fingerprint, handle: fileHandleOf(handle), input, samples: [], stop: new AbortController() })
    entries.value = [...entries.value, {
      id: clip.id, fileName: clip.fileName, sessionId: clip.sessionId, patientId: clip.patientId, clipId: clip.id, status: newStatus(clip.size, 'unfinished'), rate: null,
    }]
  }

  async function restoreOne(note: KeptUpload) {
    try {
      const clip = await network.readClip(note.clipId)
      if (clip.status !== 'uploading') return await dropUploadNote(note.clipId)
      if (entries.value.some(entry => entry.clipId === clip.id)) return
      addUnfinished(clip, note)
      await reopen(clip.id, false)
    } catch (error) {
      // A clip that is gone needs no note; a server that does not answer is asked at the next page load.
      if (toUploadProblem(error).status === 404) await dropUploadNote(note.clipId)
    }
  }

  /** Finds the uploads that this person began in this browser and that were cut off; those whose file still opens go on. */
  async function restore() {
    if (!session.me) return
    const held = await heldUploads()
    for (const note of await readUploadNotes(session.me.id)) {
      if (!held.has(note.clipId) && !entries.value.some(entry => entry.clipId === note.clipId)) await restoreOne(note)
    }
  }

  /** Goes on with the file behind the kept handle. @returns false when the person has to pick it */
  async function reopen(id: string, mayAsk = true): Promise<boolean> {
    const handle = running.get(id)?.handle
    const file = handle ? await reopenFile(handle, mayAsk) : null
    return file !== null && await goOn(id, file)
  }

  /** Goes on with a file that was picked again. @returns whether it is the one that was begun */
  async function goOn(id: string, file: NamedFile): Promise<boolean> {
    const one = running.get(id)
    if (!one || await fingerprintOf(file) !== one.fingerprint) return false
    one.file = file
    run(id)
    return true
  }

  /** @returns the upload of this very file that is on its way or can go on. */
  function recognise(fingerprint: string): UploadEntry | null {
    return entries.value.find(({ id, status }) => !hasEnded(status) && running.get(id)?.fingerprint === fingerprint) ?? null
  }

  return { entries, isLeavingAny, changes, start, retry, cancel, dismiss, leave, restore, reopen, goOn, recognise }
})
