import { pitchAngle } from '../direction'
import { defineMeasure, recipe } from '../measure-definition'

/** Tragus → canthus against the horizontal; + chin up. */
export const gazeAngle = defineMeasure({
  id: 'gazeAngle',
  reference: 'vertical',
  recipes: [recipe({
    views: ['sagittal'],
    landmarks: ['tragus', 'canthus'],
    unit: 'deg',
    compute: (at, { facing }) => pitchAngle(at('tragus'), at('canthus'), facing),
    lines: [{ from: ['tragus'], to: ['canthus'], segment: 'head' }],
    shownAt: ['canthus'],
  })],
  changeFloor: { deg: 5 },
  segments: ['head'],
  source: 'Tragus–canthus line to the horizontal. Not judged.',
  cautions: ['camera-roll', 'out-of-plane'],
})
