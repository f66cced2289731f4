import { clearanceRecipe } from '../clearance'
import { defineMeasure } from '../measure-definition'

/** Height of the arm support over the lower ribs; 0 level, + support above the rib. */
export const armSupportToRib = defineMeasure({
  id: 'armSupportToRib',
  reference: 'vertical',
  recipes: [clearanceRecipe('lowerRib', 'armSupportTop', 'equipment')],
  changeFloor: { mm: 10 },
  segments: ['arm', 'equipment'],
  source: 'Arm support level with the lower ribs in standing: common practice; the manual of the equipment decides.',
  cautions: ['clearance-by-manual', 'scale-in-plane', 'camera-roll', 'parallax'],
})
