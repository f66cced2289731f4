import type { Clip, UploadState } from '#shared/schemas/clip'
import { UploadProblem, type UploadNetwork, type UploadPlan, type UploadSurroundings } from '~/upload/upload-network'

/** An answer that takes longer will not come. */
const ANSWER_MS = 30_000
/** Joining two gigabytes takes the storage a while. */
const JOIN_MS = 150_000
/** When the server says "not signed in" and we know of nothing, it is asked again after this long. */
const UNSURE_MS = 2_000

function toProblem(error: unknown): UploadProblem {
  const { status, code, retryAfter } = parseApiError(error)
  return new UploadProblem(status, code, retryAfter == null ? null : retryAfter * 1000, { cause: error })
}

/** Waits for something of the browser, or until the signal says to stop. */
function until(signal: AbortSignal, watch: (done: () => void) => () => void): Promise<void> {
  return new Promise((resolve, reject) => {
    signal.throwIfAborted()
    const forget = watch(() => {
      signal.removeEventListener('abort', leave)
      resolve()
    })
    function leave() {
      forget()
      reject(signal.reason)
    }
    signal.addEventListener('abort', leave, { once: true })
  })
}

function waitFor(target: EventTarget, name: string, done: () => void): () => void {
  target.addEventListener(name, done, { once: true })
  return () => target.removeEventListener(name, done)
}

/** What uploads ask of the server, the storage and the browser. */
export function useUploadNetwork(sessionIdOf: () => string): { network: UploadNetwork, surroundings: UploadSurroundings } {
  const api = useApi()
  const session = useSessionStore()
  async function ask<Answer>(path: string, options: Parameters<typeof api>[1] = {}, withinMs = ANSWER_MS): Promise<Answer> {
    try {
      return await api<Answer>(path, { ...options, signal: AbortSignal.timeout(withinMs) })
    } catch (error) {
      throw toProblem(error)
    }
  }
  const network: UploadNetwork = {
    create: (input, idempotencyKey) => ask<{ clip: Clip, upload: UploadPlan }>(`/api/sessions/${sessionIdOf()}/clips`, { method: 'POST', body: { ...input }, idempotencyKey }),
    readUpload: clipId => ask<UploadState>(`/api/clips/${clipId}/upload`),
    signParts: async (clipId, partNumbers) => (await ask<{ parts: { partNumber: number, url: string }[] }>(`/api/clips/${clipId}/upload/parts`, { method: 'POST', body: { partNumbers } })).parts,
    putPart: putBlob,
    complete: async (clipId, input) => (await ask<{ clip: Clip }>(`/api/clips/${clipId}/upload/complete`, { method: 'POST', body: { ...input } }, JOIN_MS)).clip,
    readClip: clipId => ask<Clip>(`/api/clips/${clipId}`),
    remove: clipId => ask(`/api/clips/${clipId}`, { method: 'DELETE' }),
  }
  const wait = (ms: number, signal: AbortSignal) => until(signal, (done) => {
    const timer = setTimeout(done, ms)
    return () => clearTimeout(timer)
  })
  const surroundings: UploadSurroundings = {
    now: Date.now,
    random: Math.random,
    wait,
    isOnline: () => navigator.onLine,
    whenOnline: signal => navigator.onLine ? Promise.resolve() : until(signal, done => waitFor(window, 'online', done)),
    whenSignedIn: signal => session.me && !session.isExpired
      ? wait(UNSURE_MS, signal)
      : until(signal, (done) => {
          const stop = watch(() => session.me !== null && !session.isExpired, (isIn) => {
            if (!isIn) return
            stop()
            done()
          })
          return stop
        }),
  }
  return { network, surroundings }
}
