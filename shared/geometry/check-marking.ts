import { GeometryError } from './geometry-error'
import { findLandmark, type Landmark } from './landmarks'
import type { MarkedPoint, MarkingBody } from './marking'

/** Largest picture side that is believed, in pixels. */
const LARGEST_PICTURE_PX = 100_000
/** Two landmarks closer than this are one point. */
export const COINCIDENCE_PX = 1e-6

/** A landmark of the marking after checking: known, inside the picture, told apart from the others. */
export interface CheckedLandmark {
  readonly landmark: Landmark
  readonly x: number
  readonly y: number
  readonly sd: number | null
}

function checkPictureSize(body: MarkingBody): void {
  for (const side of ['width', 'height'] as const) {
    const size = body[side]
    if (!Number.isFinite(size)) throw new GeometryError('not-finite', `The picture ${side} is not a number`, [side])
    if (size < 1 || size > LARGEST_PICTURE_PX) {
      throw new GeometryError('picture-size-invalid', `The picture ${side} must be 1 to ${LARGEST_PICTURE_PX} px`, [side])
    }
  }
}

function checkPoint(point: MarkedPoint, body: MarkingBody, path: readonly string[]): void {
  for (const axis of ['x', 'y'] as const) {
    if (!Number.isFinite(point[axis])) throw new GeometryError('not-finite', `${path.join('.')} is not a number`, [...path, axis])
  }
  if (point.x < 0 || point.y < 0 || point.x > body.width || point.y > body.height) {
    throw new GeometryError('landmark-out-of-picture', `${path.join('.')} lies outside the picture`, path)
  }
}

function checkSd(sd: number | undefined, body: MarkingBody, path: readonly string[]): number | null {
  if (sd === undefined) return null
  if (!Number.isFinite(sd)) throw new GeometryError('not-finite', `${path.join('.')} is not a number`, path)
  if (sd < 0 || sd > body.width + body.height) {
    throw new GeometryError('sd-invalid', `${path.join('.')} must lie between 0 and the size of the picture`, path)
  }
  return sd
}

function knownLandmark(name: string, field: string): Landmark {
  const landmark = findLandmark(name)
  if (!landmark) throw new GeometryError('unknown-landmark', `There is no landmark ${name}`, [field, name])
  return landmark
}

function checkLandmark(name: string, body: MarkingBody): CheckedLandmark | null {
  const path = ['landmarks', name]
  const landmark = knownLandmark(name, 'landmarks')
  if (!landmark.views.includes(body.view)) {
    throw new GeometryError('landmark-not-in-view', `${name} does not belong to the ${body.view} view`, path)
  }
  const mark = body.landmarks[name]
  if (!mark) return null
  if (body.notVisible && Object.hasOwn(body.notVisible, name)) {
    throw new GeometryError('marked-and-not-visible', `${name} is placed and said to be not visible`, path)
  }
  checkPoint(mark, body, path)
  return { landmark, x: mark.x, y: mark.y, sd: checkSd(mark.sd, body, [...path, 'sd']) }
}

/** Equipment may touch the body, and then its point lies on a landmark's; two body landmarks never share a point. */
function checkApart(marks: readonly CheckedLandmark[]): void {
  for (let i = 0; i < marks.length; i++) {
    const a = marks[i]
    if (!a || a.landmark.equipment) continue
    for (let j = 0; j < i; j++) {
      const b = marks[j]
      if (!b || b.landmark.equipment) continue
      if (Math.abs(a.x - b.x) < COINCIDENCE_PX && Math.abs(a.y - b.y) < COINCIDENCE_PX) {
        throw new GeometryError('landmarks-coincide', `${b.landmark.id} and ${a.landmark.id} lie on one point`, ['landmarks', a.landmark.id])
      }
    }
  }
}

function checkLines(body: MarkingBody): void {
  if (body.plumbLine) {
    checkPoint(body.plumbLine.top, body, ['plumbLine', 'top'])
    checkPoint(body.plumbLine.bottom, body, ['plumbLine', 'bottom'])
  }
  if (body.scale) {
    checkPoint(body.scale.from, body, ['scale', 'from'])
    checkPoint(body.scale.to, body, ['scale', 'to'])
    if (!Number.isFinite(body.scale.lengthMm)) {
      throw new GeometryError('not-finite', 'The length of the scale is not a number', ['scale', 'lengthMm'])
    }
  }
}

/**
 * The landmarks of a body, checked: every number finite, every point inside the picture (its edges included), every name
 * known in this view, no two body landmarks on one point.
 * @throws GeometryError whose path names the landmark or field at fault.
 */
export function checkMarking(body: MarkingBody): readonly CheckedLandmark[] {
  checkPictureSize(body)
  checkLines(body)
  for (const name of Object.keys(body.notVisible ?? {})) knownLandmark(name, 'notVisible')
  const marks: CheckedLandmark[] = []
  for (const name of Object.keys(body.landmarks)) {
    const mark = checkLandmark(name, body)
    if (mark) marks.push(mark)
  }
  checkApart(marks)
  return marks
}
