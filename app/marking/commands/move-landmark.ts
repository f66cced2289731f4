import type { MarkedLandmark, MarkedPoint } from '#shared/geometry/marking'
import { withLandmarkState } from '../document'
import type { MarkingDocument } from '../document'

/** A marked landmark goes from one place to another. */
export interface MoveLandmark {
  readonly type: 'landmark.move'
  readonly landmark: string
  readonly from: MarkedLandmark
  readonly to: MarkedLandmark
}

/**
 * The landmark keeps its `sd`, which belongs to how it was marked and not to where.
 * @param to pixels of the review copy.
 * @returns the command, or `null` when the landmark has no point or would stay where it is.
 */
export function moveLandmark(document: MarkingDocument, landmark: string, to: MarkedPoint): MoveLandmark | null {
  const from = document.landmarks[landmark]
  if (!from || (from.x === to.x && from.y === to.y)) return null
  return { type: 'landmark.move', landmark, from, to: { ...from, x: to.x, y: to.y } }
}

export function applyMoveLandmark(document: MarkingDocument, command: MoveLandmark): MarkingDocument {
  return withLandmarkState(document, command.landmark, { kind: 'marked', point: command.to })
}

export function invertMoveLandmark(command: MoveLandmark): MoveLandmark {
  return { ...command, from: command.to, to: command.from }
}
