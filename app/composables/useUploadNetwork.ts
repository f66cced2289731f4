import type { Clip, UploadState } from '#shared/schemas/clip'
import { UploadProblem, type PutOptions, type UploadNetwork, type UploadPlan, type UploadSurroundings } from '~/upload/upload-network'

const SILENCE_MS = 120_000

/** Sends bytes to the storage itself; XMLHttpRequest, because fetch does not tell how much has left. */
function putPart(url: string, bytes: Blob, { signal, onProgress }: PutOptions): Promise<string | null> {
  return new Promise((resolve, reject) => {
    const request = new XMLHttpRequest()
    const stop = () => request.abort()
    const end = (finish: () => void) => {
      signal.removeEventListener('abort', stop)
      finish()
    }
    request.open('PUT', url)
    request.timeout = SILENCE_MS
    request.upload.onprogress = event => onProgress(event.loaded)
    request.onload = () => end(() => {
      if (request.status >= 200 && request.status < 300) resolve(request.getResponseHeader('ETag'))
      // An address that is too old is refused; the engine asks for a new one.
      else reject(new UploadProblem(request.status, request.status === 403 ? 'address-refused' : 'storage-refused'))
    })
    request.onerror = () => end(() => reject(new UploadProblem(0, 'network')))
    request.ontimeout = () => end(() => reject(new UploadProblem(0, 'network')))
    request.onabort = () => end(() => reject(signal.reason))
    signal.addEventListener('abort', stop, { once: true })
    request.send(bytes)
  })
}

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
  async function ask<Answer>(...given: Parameters<typeof api>): Promise<Answer> {
    try {
      return await api<Answer>(...given)
    } catch (error) {
      throw toProblem(error)
    }
  }
  const network: UploadNetwork = {
    create: (input, idempotencyKey) => ask<{ clip: Clip, upload: UploadPlan }>(`/api/sessions/${sessionIdOf()}/clips`, { method: 'POST', body: { ...input }, idempotencyKey }),
    readUpload: clipId => ask<UploadState>(`/api/clips/${clipId}/upload`),
    signParts: async (clipId, partNumbers) => (await ask<{ parts: { partNumber: number, url: string }[] }>(`/api/clips/${clipId}/upload/parts`, { method: 'POST', body: { partNumbers } })).parts,
    putPart,
    complete: async (clipId, input) => (await ask<{ clip: Clip }>(`/api/clips/${clipId}/upload/complete`, { method: 'POST', body: { ...input } })).clip,
    readClip: clipId => ask<Clip>(`/api/clips/${clipId}`),
    remove: clipId => ask(`/api/clips/${clipId}`, { method: 'DELETE' }),
  }
  const surroundings: UploadSurroundings = {
    now: Date.now,
    random: Math.random,
    wait: (ms, signal) => until(signal, (done) => {
      const timer = setTimeout(done, ms)
      return () => clearTimeout(timer)
    }),
    isOnline: () => navigator.onLine,
    whenOnline: signal => navigator.onLine ? Promise.resolve() : until(signal, done => waitFor(window, 'online', done)),
    whenSignedIn: signal => session.me && !session.isExpired
      ? Promise.resolve()
      : until(signal, done => watch(() => session.me !== null && !session.isExpired, isIn => isIn && done())),
  }
  return { network, surroundings }
}
