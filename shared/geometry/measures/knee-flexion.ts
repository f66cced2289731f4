import { hangingAngle } from '../direction'
import { subtract } from '../dual'
import { defineMeasure, recipe } from '../measure-definition'

/** Thigh against shank at the lateral epicondyle; + flexion, − hyperextension. */
export const kneeFlexion = defineMeasure({
  id: 'kneeFlexion',
  reference: 'body',
  recipes: [recipe({
    views: ['sagittal'],
    landmarks: ['greaterTrochanter', 'lateralEpicondyle', 'lateralMalleolus'],
    unit: 'deg',
    compute: (at, { facing }) => subtract(
      hangingAngle(at('greaterTrochanter'), at('lateralEpicondyle'), facing),
      hangingAngle(at('lateralEpicondyle'), at('lateralMalleolus'), facing),
    ),
    lines: [
      { from: ['greaterTrochanter'], to: ['lateralEpicondyle'], segment: 'thigh' },
      { from: ['lateralMalleolus'], to: ['lateralEpicondyle'], segment: 'shank' },
    ],
    shownAt: ['lateralEpicondyle'],
  })],
  defaultTarget: { low: -5, high: 10 },
  changeFloor: { deg: 5 },
  segments: ['thigh', 'shank'],
  source: 'Thigh angle less shank angle (Winter, Biomechanics and Motor Control of Human Movement, ch. 3). Target: design choice around the standing posture of Woodhull et al. 1985.',
  cautions: ['out-of-plane'],
})
