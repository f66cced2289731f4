import { rise } from './direction'
import type { LandmarkId, Segment } from './landmarks'
import { recipe, type Recipe } from './measure-definition'

/** Vertical distance in millimetres, + when `upper` lies above `lower`. Needs a scale. */
export function clearanceRecipe(lower: LandmarkId, upper: LandmarkId, segment: Segment): Recipe {
  return recipe({
    views: ['sagittal'],
    landmarks: [lower, upper],
    unit: 'mm',
    needsScale: true,
    facingFree: true,
    compute: (at, { toMillimetres }) => toMillimetres(rise(at(lower), at(upper))),
    lines: [{ from: [lower], to: [upper], segment }],
    shownAt: [lower, upper],
  })
}
