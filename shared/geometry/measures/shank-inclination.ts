import { hangingAngle } from '../direction'
import { scaleBy } from '../dual'
import { defineMeasure, recipe } from '../measure-definition'

/** Lateral malleolus → lateral epicondyle against the vertical; + knee in front of the ankle. */
export const shankInclination = defineMeasure({
  id: 'shankInclination',
  reference: 'vertical',
  recipes: [recipe({
    views: ['sagittal'],
    landmarks: ['lateralEpicondyle', 'lateralMalleolus'],
    unit: 'deg',
    compute: (at, { facing }) => scaleBy(hangingAngle(at('lateralEpicondyle'), at('lateralMalleolus'), facing), -1),
    lines: [{ from: ['lateralMalleolus'], to: ['lateralEpicondyle'], segment: 'shank' }],
    shownAt: ['lateralEpicondyle', 'lateralMalleolus'],
  })],
  changeFloor: { deg: 5 },
  segments: ['shank'],
  source: 'Segment angle to the vertical, signed by facing. Not judged.',
  cautions: ['camera-roll', 'out-of-plane'],
})
