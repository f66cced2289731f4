import { hangingAngle, risingAngle } from '../direction'
import { add } from '../dual'
import { defineMeasure, recipe } from '../measure-definition'

/** Trunk against thigh at the greater trochanter; + flexion, − extension. Not the hip's own range of motion. */
export const hipFlexion = defineMeasure({
  id: 'hipFlexion',
  reference: 'body',
  recipes: [recipe({
    views: ['sagittal'],
    landmarks: ['acromion', 'greaterTrochanter', 'lateralEpicondyle'],
    unit: 'deg',
    compute: (at, { facing }) => add(
      risingAngle(at('greaterTrochanter'), at('acromion'), facing),
      hangingAngle(at('greaterTrochanter'), at('lateralEpicondyle'), facing),
    ),
    lines: [
      { from: ['greaterTrochanter'], to: ['acromion'], segment: 'trunk' },
      { from: ['greaterTrochanter'], to: ['lateralEpicondyle'], segment: 'thigh' },
    ],
    shownAt: ['greaterTrochanter'],
  })],
  defaultTarget: { low: -15, high: 10 },
  changeFloor: { deg: 5 },
  segments: ['trunk', 'thigh'],
  source: 'Trunk–thigh angle, trunk inclination plus thigh inclination. Target: design choice around the standing posture of Woodhull et al. 1985, Eur J Appl Physiol 54:109–115.',
  cautions: ['not-joint-range', 'out-of-plane'],
})
