import type { Clip, ClipInput, UploadCompleteInput } from '#shared/schemas/clip'
import type { PutOptions, StoredPart, UploadNetwork, UploadSurroundings } from '~/upload/upload-network'
import { UploadProblem } from '~/upload/upload-network'

export const CLIP_ID = '01890000-0000-7000-8000-000000000001'

export function aClip(change: Partial<Clip> = {}): Clip {
  return {
    id: CLIP_ID, sessionId: '01890000-0000-7000-8000-000000000002', patientId: '01890000-0000-7000-8000-000000000003', boutId: null,
    fileName: 'stand.mp4', size: 0, contentType: 'video/mp4', view: 'sagittal', side: 'right', recordedAt: null, status: 'uploading', reason: null, progress: 0,
    width: null, height: null, frameCount: null, frameRate: null, durationMs: null, stillCount: 0, markingCount: 0, createdAt: '2026-11-27T09:00:00.000Z', ...change,
  }
}

/**
 * The other end of the wire, kept in memory: a server with one clip and a storage with its parts. Failures are put in as
 * a queue per call: the next calls throw what stands there (null lets one through).
 */
export function fakeWire(size: number, partSize: number) {
  const bytes = new Uint8Array(size).map((_, index) => index % 251)
  const file = new Blob([bytes])
  const plan = { partSize, partCount: Math.ceil(size / partSize) }
  const parts = new Map<number, Uint8Array>()
  const puts: number[] = []
  const signed: number[][] = []
  const calls: string[] = []
  const failures: Record<string, (UploadProblem | null)[]> = {}
  const wire = {
    file, bytes, plan, parts, puts, signed, calls, failures,
    clip: aClip({ size }), mostAtOnce: 0,
    /** Called while a part is on its way. */
    onPut: async (_partNumber: number, _options: PutOptions): Promise<void> => undefined,
    /** What the clip becomes, look by look, once it is complete. */
    looks: [aClip({ size, status: 'processing', progress: 0.4 }), aClip({ size, status: 'ready', progress: 1 })],
    /** The storage keeps the part although its answer is a failure. */
    keepsDespiteFailure: false,
    storedBytes: () => Buffer.concat(Array.from({ length: plan.partCount }, (_, index) => parts.get(index + 1) ?? new Uint8Array())),
  }
  let atOnce = 0

  function step(call: string) {
    calls.push(call)
    const problem = failures[call]?.shift()
    if (problem) throw problem
  }

  const stored = (): StoredPart[] => [...parts].sort(([a], [b]) => a - b).map(([partNumber, held]) => ({ partNumber, size: held.length, etag: `etag-${partNumber}` }))

  const network: UploadNetwork = {
    create: async (_input: ClipInput, _key: string) => {
      step('create')
      return { clip: wire.clip, upload: plan }
    },
    readUpload: async () => {
      step('readUpload')
      return { ...plan, parts: stored() }
    },
    signParts: async (_clipId, partNumbers) => {
      step('signParts')
      signed.push(partNumbers)
      return partNumbers.map(partNumber => ({ partNumber, url: `https://storage.example/${partNumber}?${signed.length}` }))
    },
    putPart: async (url, blob, options) => {
      const partNumber = Number(new URL(url).pathname.slice(1))
      puts.push(partNumber)
      atOnce += 1
      wire.mostAtOnce = Math.max(wire.mostAtOnce, atOnce)
      try {
        options.onProgress(Math.floor(blob.size / 2))
        await wire.onPut(partNumber, options)
        await new Promise(resolve => setImmediate(resolve))
        options.signal.throwIfAborted()
        const problem = failures[`putPart ${partNumber}`]?.shift()
        if (!problem || wire.keepsDespiteFailure) parts.set(partNumber, new Uint8Array(await blob.arrayBuffer()))
        if (problem) throw problem
        return `"etag-${partNumber}"`
      } finally {
        atOnce -= 1
      }
    },
    complete: async (_clipId, input: UploadCompleteInput) => {
      step('complete')
      if (wire.clip.status !== 'uploading') throw new UploadProblem(409, 'upload-not-open')
      if (input.parts.some(({ partNumber }) => !parts.has(partNumber)) || input.parts.length !== plan.partCount) throw new UploadProblem(409, 'part-missing')
      wire.clip = aClip({ size, status: 'processing' })
      return wire.clip
    },
    readClip: async () => {
      step('readClip')
      if (wire.clip.status === 'processing') wire.clip = wire.looks.shift() ?? wire.clip
      return wire.clip
    },
    remove: async () => { step('remove') },
  }
  return { ...wire, wire, network }
}

/** Time that passes only when somebody waits, and a network and a person that can be away. */
export function fakeSurroundings() {
  let now = 1_000_000
  const waits: number[] = []
  const state = { isOnline: true, isSignedIn: true }
  const whenOnline: (() => void)[] = []
  const whenSignedIn: (() => void)[] = []
  const until = (isSo: () => boolean, list: (() => void)[]) => (signal: AbortSignal) => new Promise<void>((resolve, reject) => {
    if (isSo()) return resolve()
    list.push(resolve)
    signal.addEventListener('abort', () => reject(signal.reason), { once: true })
  })
  const surroundings: UploadSurroundings = {
    now: () => now,
    random: () => 0.5,
    wait: async (ms, signal) => {
      waits.push(ms)
      now += ms
      await new Promise(resolve => setImmediate(resolve))
      signal.throwIfAborted()
    },
    isOnline: () => state.isOnline,
    whenOnline: until(() => state.isOnline, whenOnline),
    whenSignedIn: until(() => state.isSignedIn, whenSignedIn),
  }
  return {
    surroundings, waits,
    pass: (ms: number) => { now += ms },
    goOffline: () => { state.isOnline = false },
    comeBack: () => { state.isOnline = true; whenOnline.splice(0).forEach(go => go()) },
    signOut: () => { state.isSignedIn = false },
    signIn: () => { state.isSignedIn = true; whenSignedIn.splice(0).forEach(go => go()) },
  }
}

/** Lets everything that can go on without waiting for anybody go on. */
export async function settle() {
  for (let turn = 0; turn < 50; turn++) await new Promise(resolve => setImmediate(resolve))
}
