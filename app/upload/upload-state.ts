import type { Clip, ClipRefusal } from '#shared/schemas/clip'
import type { UploadPause } from './patience'
import type { UploadPlan, UploadProblem } from './upload-network'

/**
 * Where an upload stands.
 * - `starting`: the server is asked; `queued`: others go first; `sending`; `completing`: the parts are joined
 * - `processing`: the server checks and prepares the clip; it goes on without us
 * - `ready`, `refused`, `cancelled`: the end
 * - `stopped`: a failure that does not pass by itself, see `problem`; `unfinished`: begun earlier, waits for its file
 */
export type UploadPhase =
  | 'starting' | 'queued' | 'sending' | 'completing' | 'processing' | 'ready' | 'refused' | 'cancelled' | 'stopped' | 'unfinished'

export interface UploadStatus {
  readonly phase: UploadPhase
  /** Bytes in the storage or on their way there. */
  readonly sentBytes: number
  readonly totalBytes: number
  /** Why nothing moves just now, in whatever phase it is. */
  readonly pause: UploadPause | null
  /** Share of the review copy that is made, 0 to 1. */
  readonly prepared: number
  readonly problem: UploadProblem | null
  readonly reason: ClipRefusal | null
}

export type UploadEvent =
  | { readonly type: 'began' }
  | { readonly type: 'planned', readonly clip: Clip, readonly plan: UploadPlan, readonly storedBytes: number }
  | { readonly type: 'moved', readonly sentBytes: number }
  | { readonly type: 'paused', readonly why: UploadPause }
  | { readonly type: 'resumed' }
  | { readonly type: 'joining' }
  | { readonly type: 'followed', readonly clip: Clip }
  | { readonly type: 'stopped', readonly problem: UploadProblem }
  | { readonly type: 'cancelled' }

const ENDS: ReadonlySet<UploadPhase> = new Set(['ready', 'refused', 'cancelled'])
const LEAVING: ReadonlySet<UploadPhase> = new Set(['starting', 'queued', 'sending', 'completing'])

/** @returns the status of an upload that has not begun, or waits to go on. */
export function newStatus(totalBytes: number, phase: 'starting' | 'unfinished' = 'starting'): UploadStatus {
  return { phase, sentBytes: 0, totalBytes, pause: null, prepared: 0, problem: null, reason: null }
}

/** Whether closing the page now would interrupt it. */
export function isLeaving({ phase }: UploadStatus): boolean {
  return LEAVING.has(phase)
}

/** Whether nothing will happen to it any more. */
export function hasEnded({ phase }: UploadStatus): boolean {
  return ENDS.has(phase)
}

/** One step of the state machine. What comes after the end changes nothing: a late answer does not bring a cancelled upload back. */
export function advance(status: UploadStatus, event: UploadEvent): UploadStatus {
  if (hasEnded(status)) return status
  const calm = { ...status, pause: null, problem: null }
  switch (event.type) {
    case 'began': return { ...calm, phase: 'starting' }
    case 'planned': return { ...calm, phase: 'queued', sentBytes: event.storedBytes }
    // A part that starts again takes bytes back: the truth, and no news of movement.
    case 'moved': return { ...status, ...(event.sentBytes > status.sentBytes ? moving(status) : {}), sentBytes: event.sentBytes }
    case 'paused': return { ...status, pause: event.why }
    case 'resumed': return { ...status, pause: null }
    case 'joining': return { ...calm, phase: 'completing', sentBytes: status.totalBytes }
    case 'followed': return follow(calm, event.clip)
    case 'stopped': return { ...calm, phase: 'stopped', problem: event.problem }
    case 'cancelled': return { ...calm, phase: 'cancelled' }
  }
}

/** Bytes that were on their way still arrive while the rest waits for the network or a sign-in. */
function moving({ pause }: UploadStatus): Pick<UploadStatus, 'phase' | 'pause'> {
  return { phase: 'sending', pause: pause === 'retrying' ? null : pause }
}

function follow(status: UploadStatus, clip: Clip): UploadStatus {
  if (clip.status === 'ready') return { ...status, phase: 'ready', prepared: 1 }
  if (clip.status === 'refused') return { ...status, phase: 'refused', reason: clip.reason ?? 'could-not-process' }
  return { ...status, phase: 'processing', sentBytes: status.totalBytes, prepared: clip.progress }
}
