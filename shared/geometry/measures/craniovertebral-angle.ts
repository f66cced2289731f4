import { pitchAngle } from '../direction'
import { defineMeasure, recipe } from '../measure-definition'

/** C7 → tragus against the horizontal; larger when the head is less forward. */
export const craniovertebralAngle = defineMeasure({
  id: 'craniovertebralAngle',
  reference: 'vertical',
  recipes: [recipe({
    views: ['sagittal'],
    landmarks: ['c7', 'tragus'],
    unit: 'deg',
    compute: (at, { facing }) => pitchAngle(at('c7'), at('tragus'), facing),
    lines: [{ from: ['c7'], to: ['tragus'], segment: 'head' }],
    shownAt: ['tragus'],
  })],
  changeFloor: { deg: 5 },
  segments: ['head'],
  source: 'Tragus–C7 line to the horizontal. Age means of women, 65–74 48.84°, 75–84 41.20°, 85+ 35.60°: Nemmers et al. 2009, J Geriatr Phys Ther 32:10–14. Not judged by one line.',
  cautions: ['age-dependent', 'camera-roll', 'out-of-plane'],
})
