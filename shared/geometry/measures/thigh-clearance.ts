import { clearanceRecipe } from '../clearance'
import { defineMeasure } from '../measure-definition'

/** Free space between the top of the thighs, when seated, and the lower edge of the body support above them. */
export const thighClearance = defineMeasure({
  id: 'thighClearance',
  reference: 'vertical',
  recipes: [clearanceRecipe('thighTop', 'bodySupportBottom', 'equipment')],
  suggestedTarget: { low: 25, high: 50 },
  changeFloor: { mm: 10 },
  segments: ['thigh', 'equipment'],
  source: '25–50 mm (1–2 in) between body support and thighs when seated: common practice; the manual of the equipment decides.',
  cautions: ['clearance-by-manual', 'scale-in-plane', 'camera-roll', 'parallax'],
})
