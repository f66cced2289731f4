import { pitchAngle } from './direction'
import type { LandmarkId, Segment, View } from './landmarks'
import { recipe, type Recipe } from './measure-definition'

/** Line from the person's right landmark to the left one against the horizontal; + person's left higher. */
export function tiltRecipe(views: readonly View[], left: LandmarkId, right: LandmarkId, segment: Segment): Recipe {
  return recipe({
    views,
    landmarks: [left, right],
    unit: 'deg',
    compute: (at, { viewSign }) => pitchAngle(at(right), at(left), viewSign),
    lines: [{ from: [right], to: [left], segment }],
    shownAt: [left, right],
  })
}
