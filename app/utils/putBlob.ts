import { UploadProblem } from '~/upload/upload-network'
import type { PutOptions } from '~/upload/upload-network'

/** A connection on which nothing moved this long is dead, whatever the browser believes. */
const SILENCE_MS = 60_000

/**
 * Puts bytes to a signed address. By XMLHttpRequest, because `fetch` cannot tell how much has left.
 * @returns the entity tag of the answer, null when the storage does not show it
 * @throws UploadProblem `network` (status 0), `address-refused`, `upload-not-open`, `storage-refused`; the signal's reason when aborted
 */
export function putBlob(url: string, bytes: Blob, { signal, onProgress }: PutOptions): Promise<string | null> {
  return new Promise((resolve, reject) => {
    signal.throwIfAborted()
    const request = new XMLHttpRequest()
    const fail = (status: number, code: string) => reject(new UploadProblem(status, code))
    const stop = () => request.abort()
    let silence = setTimeout(stop, SILENCE_MS)
    const stir = () => {
      clearTimeout(silence)
      silence = setTimeout(stop, SILENCE_MS)
    }
    request.upload.addEventListener('progress', (event) => {
      stir()
      onProgress(event.loaded)
    })
    request.addEventListener('load', () => {
      if (request.status >= 200 && request.status < 300) resolve(request.getResponseHeader('ETag'))
      else fail(request.status, refusalOf(request.status))
    })
    request.addEventListener('error', () => fail(0, 'network'))
    request.addEventListener('abort', () => signal.aborted ? reject(signal.reason) : fail(0, 'network'))
    request.addEventListener('loadend', () => {
      clearTimeout(silence)
      signal.removeEventListener('abort', stop)
      window.removeEventListener('offline', stop)
    })
    signal.addEventListener('abort', stop, { once: true })
    // The browser may take minutes to notice that a socket is gone.
    window.addEventListener('offline', stop, { once: true })
    request.open('PUT', url)
    request.send(bytes)
  })
}

function refusalOf(status: number): string {
  if (status === 401 || status === 403) return 'address-refused'
  return status === 404 ? 'upload-not-open' : 'storage-refused'
}
