import type { Clip, ClipInput, UploadCompleteInput, UploadState } from '#shared/schemas/clip'

/** How a file is cut: every part has `partSize` bytes, the last one what is left. */
export interface UploadPlan { readonly partSize: number, readonly partCount: number }
export type StoredPart = UploadState['parts'][number]

/** What an upload asks of the outside. Every call throws `UploadProblem`. */
export interface UploadNetwork {
  create: (input: ClipInput, idempotencyKey: string) => Promise<{ clip: Clip, upload: UploadPlan }>
  readUpload: (clipId: string) => Promise<UploadState>
  signParts: (clipId: string, partNumbers: number[]) => Promise<{ partNumber: number, url: string }[]>
  /** Sends bytes to the storage itself. @returns the entity tag as the storage sent it, null when it is not readable. */
  putPart: (url: string, bytes: Blob, options: PutOptions) => Promise<string | null>
  complete: (clipId: string, input: UploadCompleteInput) => Promise<Clip>
  readClip: (clipId: string) => Promise<Clip>
  remove: (clipId: string) => Promise<void>
}

export interface PutOptions {
  readonly signal: AbortSignal
  /** Bytes of this part that have left so far. */
  readonly onProgress: (bytes: number) => void
}

/** Time, chance, and whether there is a network and somebody signed in. */
export interface UploadSurroundings {
  /** Milliseconds since 1970. */
  readonly now: () => number
  /** 0 to 1, 1 not included. */
  readonly random: () => number
  readonly wait: (ms: number, signal: AbortSignal) => Promise<void>
  readonly isOnline: () => boolean
  readonly whenOnline: (signal: AbortSignal) => Promise<void>
  readonly whenSignedIn: (signal: AbortSignal) => Promise<void>
}

/** A step of an upload that failed. `status` 0: no answer came. `code` is the server's word, or one of ours. */
export class UploadProblem extends Error {
  constructor(readonly status: number, readonly code: string, readonly retryAfterMs: number | null = null, options: ErrorOptions = {}) {
    super(`${status} ${code}`, options)
    this.name = 'UploadProblem'
  }
}

/** @returns the problem that was thrown, or `unexpected` with its cause. */
export function toUploadProblem(error: unknown): UploadProblem {
  return error instanceof UploadProblem ? error : new UploadProblem(-1, 'unexpected', null, { cause: error })
}
