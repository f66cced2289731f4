import type { MarkedLandmark } from '#shared/geometry/marking'
import { landmarkState, withLandmarkState } from '../document'
import type { LandmarkState, MarkingDocument } from '../document'
import type { RemoveLandmark } from './remove-landmark'

/** A landmark without a point gets one. `before` is what it was: nothing, or not visible with its reason. */
export interface PlaceLandmark {
  readonly type: 'landmark.place'
  readonly landmark: string
  readonly before: LandmarkState
  readonly point: MarkedLandmark
}

/** @param point pixels of the review copy. */
export function placeLandmark(document: MarkingDocument, landmark: string, point: MarkedLandmark): PlaceLandmark {
  return { type: 'landmark.place', landmark, before: landmarkState(document, landmark), point }
}

export function applyPlaceLandmark(document: MarkingDocument, command: PlaceLandmark): MarkingDocument {
  return withLandmarkState(document, command.landmark, { kind: 'marked', point: command.point })
}

export function invertPlaceLandmark(command: PlaceLandmark): RemoveLandmark {
  return { type: 'landmark.remove', landmark: command.landmark, point: command.point, after: command.before }
}
