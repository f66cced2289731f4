import { measureMarking } from '#shared/geometry/measure-marking'
import { type Landmark, LANDMARKS, type View } from '#shared/geometry/landmarks'
import type { MarkingBody } from '#shared/geometry/marking'
import type { Reading } from '#shared/geometry/reading'
import { BODY_MAP, bodyMapPoint } from './body-map'

/** The figure of the body map as it would stand in a picture 1080 high: 810 px from floor to crown. */
const PICTURE_HEIGHT = 1080
const SCALE = 1.5
const LEFT = 300
const TOP = 120

function place(view: View, landmark: Landmark) {
  const point = bodyMapPoint(view, landmark.id, 'right', false)
  return point ? { x: LEFT + point.x * SCALE, y: TOP + point.y * SCALE } : null
}

/** A marking of the figure with plumb line and metre scale, as a good set-up gives it. */
function referenceBody(view: View): MarkingBody {
  const landmarks = LANDMARKS.filter(landmark => landmark.views.includes(view)).flatMap((landmark) => {
    const point = place(view, landmark)
    return point ? [[landmark.id, point] as const] : []
  })
  const height = BODY_MAP.height * SCALE
  return {
    view,
    width: 1440,
    height: PICTURE_HEIGHT,
    facing: 'right',
    landmarks: Object.fromEntries(landmarks),
    plumbLine: { top: { x: 1100, y: TOP }, bottom: { x: 1100, y: TOP + height } },
    scale: { from: { x: 1000, y: TOP + height - 470 }, to: { x: 1000, y: TOP + height }, lengthMm: 1000 },
  }
}

/**
 * The readings of the drawn figure: what band a measure has with ordinary clicks, a plumb line and a scale.
 * Computed by the same core as every reading.
 */
export function referenceReadings(view: View): readonly Reading[] {
  return measureMarking(referenceBody(view)).readings
}
