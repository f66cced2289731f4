import { middle, risingAngle } from '../direction'
import type { LandmarkId, View } from '../landmarks'
import { defineMeasure, recipe, type Recipe } from '../measure-definition'

function leanRecipe(view: View, pelvisLeft: LandmarkId, pelvisRight: LandmarkId): Recipe {
  return recipe({
    views: [view],
    landmarks: [pelvisLeft, pelvisRight, 'acromionLeft', 'acromionRight'],
    unit: 'deg',
    compute: (at, { viewSign }) => risingAngle(
      middle(at(pelvisLeft), at(pelvisRight)),
      middle(at('acromionLeft'), at('acromionRight')),
      viewSign,
    ),
    lines: [{ from: [pelvisLeft, pelvisRight], to: ['acromionLeft', 'acromionRight'], segment: 'trunk' }],
    shownAt: [pelvisLeft, pelvisRight, 'acromionLeft', 'acromionRight'],
  })
}

/** Mid-ASIS (from behind: mid-PSIS) → mid-acromion against the vertical; + toward the person's left. */
export const trunkLean = defineMeasure({
  id: 'trunkLean',
  reference: 'vertical',
  recipes: [
    leanRecipe('frontal-anterior', 'asisLeft', 'asisRight'),
    leanRecipe('frontal-posterior', 'psisLeft', 'psisRight'),
  ],
  changeFloor: { deg: 3 },
  segments: ['trunk'],
  source: 'Line of the mid-points to the vertical. Not judged.',
  cautions: ['camera-roll', 'trunk-turn'],
})
