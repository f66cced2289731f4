import { hangingAngle } from '../direction'
import { defineMeasure, recipe } from '../measure-definition'

/** Greater trochanter → lateral epicondyle against the vertical; + knee in front of the hip. */
export const thighInclination = defineMeasure({
  id: 'thighInclination',
  reference: 'vertical',
  recipes: [recipe({
    views: ['sagittal'],
    landmarks: ['greaterTrochanter', 'lateralEpicondyle'],
    unit: 'deg',
    compute: (at, { facing }) => hangingAngle(at('greaterTrochanter'), at('lateralEpicondyle'), facing),
    lines: [{ from: ['greaterTrochanter'], to: ['lateralEpicondyle'], segment: 'thigh' }],
    shownAt: ['greaterTrochanter', 'lateralEpicondyle'],
  })],
  changeFloor: { deg: 5 },
  segments: ['thigh'],
  source: 'Segment angle to the vertical, signed by facing. Not judged.',
  cautions: ['camera-roll', 'out-of-plane'],
})
