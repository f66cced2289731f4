import { landmarkState, withLandmarkState } from '../document'
import type { LandmarkState, MarkingDocument } from '../document'

/** A landmark is said to be not visible, or that is taken back; a point that it had is kept in `from`. */
export interface SetNotVisible {
  readonly type: 'landmark.set-not-visible'
  readonly landmark: string
  readonly from: LandmarkState
  readonly to: LandmarkState
}

/**
 * @param reason one of `NOT_VISIBLE_REASONS` or words of the person's own; `null` takes it back.
 * @returns the command, or `null` when it would change nothing.
 */
export function setNotVisible(document: MarkingDocument, landmark: string, reason: string | null): SetNotVisible | null {
  const from = landmarkState(document, landmark)
  const current = from?.kind === 'not-visible' ? from.reason : null
  if (current === reason) return null
  return { type: 'landmark.set-not-visible', landmark, from, to: reason === null ? null : { kind: 'not-visible', reason } }
}

export function applySetNotVisible(document: MarkingDocument, command: SetNotVisible): MarkingDocument {
  return withLandmarkState(document, command.landmark, command.to)
}

export function invertSetNotVisible(command: SetNotVisible): SetNotVisible {
  return { ...command, from: command.to, to: command.from }
}
