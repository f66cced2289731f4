import { tiltRecipe } from '../frontal-tilt'
import { defineMeasure } from '../measure-definition'

/** Line of both tragi against the horizontal; + person's left higher. */
export const headTilt = defineMeasure({
  id: 'headTilt',
  reference: 'vertical',
  recipes: [tiltRecipe(['frontal-anterior', 'frontal-posterior'], 'tragusLeft', 'tragusRight', 'head')],
  changeFloor: { deg: 3 },
  segments: ['head'],
  source: 'Line of the tragi to the horizontal. Not judged.',
  cautions: ['asymmetry-is-common', 'camera-roll', 'trunk-turn'],
})
