import { pitchAngle } from '../direction'
import { subtract } from '../dual'
import type { LandmarkId, View } from '../landmarks'
import { defineMeasure, recipe, type Recipe } from '../measure-definition'

function sideBendRecipe(view: View, pelvisLeft: LandmarkId, pelvisRight: LandmarkId): Recipe {
  return recipe({
    views: [view],
    landmarks: ['acromionLeft', 'acromionRight', pelvisLeft, pelvisRight],
    unit: 'deg',
    compute: (at, { viewSign }) => subtract(
      pitchAngle(at('acromionRight'), at('acromionLeft'), viewSign),
      pitchAngle(at(pelvisRight), at(pelvisLeft), viewSign),
    ),
    lines: [
      { from: ['acromionRight'], to: ['acromionLeft'], segment: 'trunk' },
      { from: [pelvisRight], to: [pelvisLeft], segment: 'trunk' },
    ],
    shownAt: ['acromionLeft', 'acromionRight', pelvisLeft, pelvisRight],
  })
}

/** Shoulder tilt less pelvic tilt, shown as trunk side-bend; + left side longer. */
export const trunkOnPelvis = defineMeasure({
  id: 'trunkOnPelvis',
  reference: 'body',
  recipes: [
    sideBendRecipe('frontal-anterior', 'asisLeft', 'asisRight'),
    sideBendRecipe('frontal-posterior', 'psisLeft', 'psisRight'),
  ],
  changeFloor: { deg: 3 },
  segments: ['trunk'],
  source: 'Shoulder tilt less pelvic tilt. Not judged.',
  cautions: ['asymmetry-is-common', 'trunk-turn'],
})
