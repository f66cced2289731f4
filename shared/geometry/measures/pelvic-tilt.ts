import { tiltRecipe } from '../frontal-tilt'
import { defineMeasure } from '../measure-definition'

/** Line of the ASIS (from behind: PSIS) against the horizontal; + person's left higher. */
export const pelvicTilt = defineMeasure({
  id: 'pelvicTilt',
  reference: 'vertical',
  recipes: [
    tiltRecipe(['frontal-anterior'], 'asisLeft', 'asisRight', 'trunk'),
    tiltRecipe(['frontal-posterior'], 'psisLeft', 'psisRight', 'trunk'),
  ],
  judgedFrom: 5,
  changeFloor: { deg: 3 },
  segments: ['trunk'],
  source: 'Line of the iliac spines to the horizontal. Shown as change, never judged under 5°: asymmetry is common in healthy adults, Ferreira et al. 2011, J Manipulative Physiol Ther 34:371–380.',
  cautions: ['asymmetry-is-common', 'camera-roll', 'trunk-turn'],
})
