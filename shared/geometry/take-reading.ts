import { radians, toDegrees, wrapDegrees } from './angle'
import type { DualPoint } from './direction'
import { type Dual, inputDual, multiply } from './dual'
import { type BandInputs, clickVariance, formulaSd, Z95 } from './error-band'
import { GeometryError } from './geometry-error'
import type { LandmarkId, View } from './landmarks'
import type { Frame, Recipe } from './measure-definition'
import type { MeasurePlan } from './measure-plan'
import type { Pose, PosePoint } from './pose'
import type { Reading, TargetStatus, WarningCode } from './reading'
import { type TargetJudgement, targetStatus, type TargetZone } from './target'

/**
 * Own sd of a direction in radians from which the linear band is not honest any more; a divisor counts double, so it is
 * half of this, relative to itself. Up to here the 95 % band holds 94 % or more and the sd is right to 4 %: see
 * `tests/unit/shared/geometry/linear-limit.spec.ts`.
 */
export const LARGEST_LINEAR_SD = 0.2

/** How a reading is judged. */
export interface Judging {
  readonly zone: TargetZone | null
  readonly judgement: TargetJudgement
}

const NO_WARNINGS: readonly WarningCode[] = []

function inputsOf(recipe: Recipe, pose: Pose): BandInputs {
  const points: PosePoint[] = []
  for (const id of recipe.landmarks) {
    const point = pose.points.get(id)
    if (point) points.push(point)
  }
  return { points, scaleSdPx: recipe.needsScale && pose.scale ? pose.scale.sdPx : 0 }
}

/** What formulas may know of the pose. The scale's length is the last input of a recipe that uses it. */
export function frameOf(pose: Pose): Frame {
  const { scale } = pose
  return {
    facing: pose.facing ?? 1,
    viewSign: pose.viewSign,
    toMillimetres: (distancePx) => {
      if (!scale) throw new Error('A recipe without needsScale asks for millimetres')
      const count = distancePx.gradient.length
      const length = inputDual(scale.lengthPx, count - 1, count)
      const slope = -scale.mmPerPx / scale.lengthPx
      return multiply(distancePx, { value: scale.mmPerPx, gradient: length.gradient.map(part => part * slope), fragile: length.fragile })
    },
  }
}

/** Runs a recipe on the pose. Inputs in order: x and y of each landmark, then the scale's length in pixels. */
function evaluate(recipe: Recipe, frame: Frame, inputs: BandInputs): Dual {
  const { landmarks } = recipe
  const count = 2 * inputs.points.length + (recipe.needsScale ? 1 : 0)
  const at = (id: LandmarkId): DualPoint => {
    const index = landmarks.indexOf(id)
    const point = inputs.points[index]
    if (!point) throw new Error(`The recipe reaches for ${id}, which it does not name`)
    return { x: inputDual(point.x, 2 * index, count), y: inputDual(point.y, 2 * index + 1, count) }
  }
  return recipe.compute(at, frame)
}

function isTooShort(formula: Dual, inputs: BandInputs): boolean {
  for (const part of formula.fragile) {
    if (clickVariance(part, inputs) > LARGEST_LINEAR_SD * LARGEST_LINEAR_SD) return true
  }
  return false
}

function concerns(code: WarningCode, plan: MeasurePlan, recipe: Recipe, pose: Pose): boolean {
  if (code === 'no-plumb-line' || code === 'large-roll') return plan.definition.reference === 'vertical'
  if (code === 'scale-too-short') return recipe.needsScale === true
  if (code === 'left-right-swapped') return recipe.landmarks.some(id => pose.swapped.has(id))
  return true
}

function warningsOf(plan: MeasurePlan, recipe: Recipe, pose: Pose, tooShort: boolean): readonly WarningCode[] {
  const own = plan.definition.alwaysWarns
  if (!tooShort && pose.warnings.length === 0) return own
  const applying = pose.warnings.filter(code => concerns(code, plan, recipe, pose))
  const short: readonly WarningCode[] = tooShort ? ['segment-too-short'] : NO_WARNINGS
  return [...applying, ...own, ...short]
}

function statusOf(plan: MeasurePlan, recipe: Recipe, judging: Judging, value: number, sd: number): TargetStatus | null {
  const { zone, judgement } = judging
  if (!zone || (zone.unit && zone.unit !== recipe.unit) || Math.abs(value) < plan.definition.judgedFrom) return null
  return targetStatus(zone, value, sd, judgement)
}

/**
 * One reading from a recipe whose landmarks are all there.
 * @returns null where the formula has no value, as for a mid-point that falls on its own base.
 * @throws GeometryError `facing-required` when the formula needs to know where the person faces and nothing says so.
 */
export function takeReading(plan: MeasurePlan, recipe: Recipe, pose: Pose, frame: Frame, view: View, judging: Judging): Reading | null {
  if (view === 'sagittal' && pose.facing === null && !recipe.facingFree) {
    throw new GeometryError('facing-required', 'Say where the person faces, or mark heel and fifth metatarsal', ['facing'])
  }
  const inputs = inputsOf(recipe, pose)
  const formula = evaluate(recipe, frame, inputs)
  const isAngle = recipe.unit === 'deg'
  const rawSd = formulaSd(formula, inputs, pose.roll.sd)
  // Adding 0 turns −0 into 0, which would read as a sign.
  const value = (isAngle ? wrapDegrees(toDegrees(radians(formula.value))) : formula.value) + 0
  const sd = isAngle ? toDegrees(radians(rawSd)) : rawSd
  if (!Number.isFinite(value) || !Number.isFinite(sd)) return null
  const side = plan.side ?? pose.nearSide
  const status = statusOf(plan, recipe, judging, value, sd)
  return {
    measure: plan.definition.id,
    definitionVersion: plan.definition.definitionVersion,
    view,
    ...(side && { side }),
    value,
    unit: recipe.unit,
    sd,
    low: value - Z95 * sd,
    high: value + Z95 * sd,
    ...(status && { targetStatus: status }),
    warnings: warningsOf(plan, recipe, pose, isTooShort(formula, inputs)),
  }
}
