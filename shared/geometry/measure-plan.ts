import type { LandmarkId, Side, View } from './landmarks'
import type { MeasureDefinition, Recipe } from './measure-definition'
import type { Pose } from './pose'
import type { WithheldReading, WithheldReason } from './reading'
import { MEASURES } from './registry'

/** The recipes of one measure and side in one view, in the order in which they are tried. */
export interface MeasurePlan {
  readonly definition: MeasureDefinition
  readonly side: Side | null
  readonly recipes: readonly Recipe[]
}

function plansOf(view: View): readonly MeasurePlan[] {
  return MEASURES.flatMap((definition) => {
    const sides = definition.sided ? ['left', 'right'] as const : [null]
    return sides
      .map(side => ({
        definition,
        side,
        recipes: definition.recipes.filter(item => (item.side ?? null) === side && item.views.includes(view)),
      }))
      .filter(plan => plan.recipes.length > 0)
  })
}

/** Every reading that a view can give, in table order. */
export const MEASURE_PLANS: Readonly<Record<View, readonly MeasurePlan[]>> = {
  'sagittal': plansOf('sagittal'),
  'frontal-anterior': plansOf('frontal-anterior'),
  'frontal-posterior': plansOf('frontal-posterior'),
}

function isComplete(recipe: Recipe, pose: Pose): boolean {
  if (recipe.needsScale && !pose.scale) return false
  for (const id of recipe.landmarks) {
    if (!pose.points.has(id)) return false
  }
  return true
}

/** The first recipe for which everything is marked, or null. */
export function chooseRecipe(plan: MeasurePlan, pose: Pose): Recipe | null {
  for (const recipe of plan.recipes) {
    if (isComplete(recipe, pose)) return recipe
  }
  return null
}

export function withhold(plan: MeasurePlan, reason: WithheldReason, missing: readonly LandmarkId[] = []): WithheldReading {
  const base = { measure: plan.definition.id, reason, missing }
  return plan.side ? { ...base, side: plan.side } : base
}

/** Why no recipe fits: landmarks are missing from the one that is nearest, or only the scale is. */
export function explainMissing(plan: MeasurePlan, pose: Pose): WithheldReading {
  const usable = plan.recipes.filter(item => !item.needsScale || pose.scale)
  const candidates = usable.length > 0 ? usable : plan.recipes
  const gaps = candidates.map(item => item.landmarks.filter(id => !pose.points.has(id)))
  const fewest = gaps.reduce((best, gap) => (gap.length < best.length ? gap : best))
  return fewest.length === 0 ? withhold(plan, 'needs-scale') : withhold(plan, 'missing-landmarks', fewest)
}
