import { risingAngle } from '../direction'
import { defineMeasure, recipe } from '../measure-definition'

/** Greater trochanter → acromion against the vertical; + forward lean. */
export const trunkInclination = defineMeasure({
  id: 'trunkInclination',
  reference: 'vertical',
  recipes: [recipe({
    views: ['sagittal'],
    landmarks: ['greaterTrochanter', 'acromion'],
    unit: 'deg',
    compute: (at, { facing }) => risingAngle(at('greaterTrochanter'), at('acromion'), facing),
    lines: [{ from: ['greaterTrochanter'], to: ['acromion'], segment: 'trunk' }],
    shownAt: ['acromion'],
  })],
  defaultTarget: { low: -8, high: 5 },
  changeFloor: { deg: 5 },
  segments: ['trunk'],
  source: 'Segment angle to the vertical, signed by facing. Target: design choice around the standing posture of Woodhull et al. 1985, Eur J Appl Physiol 54:109–115.',
  cautions: ['camera-roll', 'out-of-plane'],
})
