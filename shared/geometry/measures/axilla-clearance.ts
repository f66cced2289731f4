import { clearanceRecipe } from '../clearance'
import { defineMeasure } from '../measure-definition'

/** Free space between the top of the trunk support and the axilla above it. */
export const axillaClearance = defineMeasure({
  id: 'axillaClearance',
  reference: 'vertical',
  recipes: [clearanceRecipe('supportTop', 'axilla', 'equipment')],
  suggestedTarget: { low: 50, high: null },
  changeFloor: { mm: 10 },
  segments: ['trunk', 'equipment'],
  source: 'At least 50 mm (2 in) free under the axilla: common practice; the manual of the equipment decides.',
  cautions: ['clearance-by-manual', 'scale-in-plane', 'camera-roll', 'parallax'],
})
