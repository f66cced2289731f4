import { hangingAngle, pitchAngle } from '../direction'
import { subtract } from '../dual'
import { defineMeasure, recipe } from '../measure-definition'

/** Shank against the heel–metatarsal line; 0 when square to it, + dorsiflexion. */
export const ankleDorsiflexion = defineMeasure({
  id: 'ankleDorsiflexion',
  reference: 'body',
  recipes: [recipe({
    views: ['sagittal'],
    landmarks: ['lateralEpicondyle', 'lateralMalleolus', 'heel', 'fifthMetatarsal'],
    unit: 'deg',
    compute: (at, { facing }) => subtract(
      pitchAngle(at('heel'), at('fifthMetatarsal'), facing),
      hangingAngle(at('lateralEpicondyle'), at('lateralMalleolus'), facing),
    ),
    lines: [
      { from: ['lateralMalleolus'], to: ['lateralEpicondyle'], segment: 'shank' },
      { from: ['heel'], to: ['fifthMetatarsal'], segment: 'foot' },
    ],
    shownAt: ['lateralMalleolus'],
  })],
  changeFloor: { deg: 5 },
  segments: ['shank', 'foot'],
  source: 'Shank inclination plus foot pitch; the heel is the lowest back edge of heel or shoe. Not judged.',
  cautions: ['foot-flat', 'out-of-plane'],
})
