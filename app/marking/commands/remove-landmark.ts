import type { MarkedLandmark } from '#shared/geometry/marking'
import { withLandmarkState } from '../document'
import type { LandmarkState, MarkingDocument } from '../document'
import type { PlaceLandmark } from './place-landmark'

/** A landmark loses its point; `after` is what it becomes: nothing, or again not visible. */
export interface RemoveLandmark {
  readonly type: 'landmark.remove'
  readonly landmark: string
  readonly point: MarkedLandmark
  readonly after: LandmarkState
}

/** @returns the command, or `null` when the landmark has no point. */
export function removeLandmark(document: MarkingDocument, landmark: string): RemoveLandmark | null {
  const point = document.landmarks[landmark]
  return point ? { type: 'landmark.remove', landmark, point, after: null } : null
}

export function applyRemoveLandmark(document: MarkingDocument, command: RemoveLandmark): MarkingDocument {
  return withLandmarkState(document, command.landmark, command.after)
}

export function invertRemoveLandmark(command: RemoveLandmark): PlaceLandmark {
  return { type: 'landmark.place', landmark: command.landmark, before: command.after, point: command.point }
}
