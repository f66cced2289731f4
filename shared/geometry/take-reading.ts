import { radians, toDegrees, wrapDegrees } from './angle'
import type { AxisSign, DualPoint } from './direction'
import { divide, type Dual, inputDual, scaleBy } from './dual'
import { type BandInputs, clickVariance, formulaSd, Z95 } from './error-band'
import { GeometryError } from './geometry-error'
import type { MarkingBody } from './marking'
import type { Frame, Recipe } from './measure-definition'
import type { MeasurePlan } from './measure-plan'
import type { Pose, PosePoint } from './pose'
import type { Reading, WarningCode } from './reading'
import { type TargetJudgement, targetStatus, type TargetZone } from './target'

/**
 * Own sd of a direction (rad) or of a divisor (relative to itself) from which the linear band is not honest any more.
 * Found by the Monte Carlo test: see `tests/unit/shared/geometry/monte-carlo.spec.ts`.
 */
export const LARGEST_LINEAR_SD = 0.2

/** How a reading is judged. */
export interface Judging {
  readonly zone: TargetZone | null
  readonly judgement: TargetJudgement
}

interface Inputs extends BandInputs {
  readonly points: readonly PosePoint[]
}

function inputsOf(recipe: Recipe, pose: Pose): Inputs {
  const points: PosePoint[] = []
  for (const id of recipe.landmarks) {
    const point = pose.points.get(id)
    if (point) points.push(point)
  }
  return { points, scaleSdPx: recipe.needsScale && pose.scale ? pose.scale.sdPx : 0 }
}

function frameOf(pose: Pose, inputCount: number): Frame {
  return {
    get facing(): AxisSign {
      if (pose.facing === null) {
        throw new GeometryError('facing-required', 'Say where the person faces, or mark heel and fifth metatarsal', ['facing'])
      }
      return pose.facing
    },
    viewSign: pose.viewSign,
    toMillimetres: (distancePx) => {
      const lengthMm = pose.scale?.lengthMm ?? Number.NaN
      return scaleBy(divide(distancePx, inputDual(pose.scale?.lengthPx ?? 0, inputCount - 1, inputCount)), lengthMm)
    },
  }
}

/** Runs a recipe on the pose. Inputs in order: x and y of each landmark, then the scale's length in pixels. */
function evaluate(recipe: Recipe, pose: Pose, inputs: Inputs): Dual {
  const count = 2 * inputs.points.length + (recipe.needsScale ? 1 : 0)
  const points: DualPoint[] = inputs.points.map((point, index) => ({
    x: inputDual(point.x, 2 * index, count),
    y: inputDual(point.y, 2 * index + 1, count),
  }))
  return recipe.compute((id) => {
    const point = points[recipe.landmarks.indexOf(id)]
    if (!point) throw new Error(`The recipe reaches for ${id}, which it does not name`)
    return point
  }, frameOf(pose, count))
}

function isTooShort(formula: Dual, inputs: Inputs): boolean {
  return formula.fragile.some(part => clickVariance(part, inputs) > LARGEST_LINEAR_SD * LARGEST_LINEAR_SD)
}

function warningsOf(plan: MeasurePlan, recipe: Recipe, pose: Pose, tooShort: boolean): readonly WarningCode[] {
  const applying = pose.warnings.filter((code) => {
    if (code === 'no-plumb-line' || code === 'large-roll') return plan.definition.reference === 'vertical'
    if (code === 'left-right-swapped') return recipe.landmarks.some(id => pose.swapped.has(id))
    return true
  })
  const own = plan.definition.alwaysWarns
  return tooShort ? [...applying, ...own, 'segment-too-short'] : [...applying, ...own]
}

function sideOf(plan: MeasurePlan, body: MarkingBody): Pick<Reading, 'side'> {
  if (plan.side) return { side: plan.side }
  return body.view === 'sagittal' && body.side ? { side: body.side } : {}
}

function statusOf(plan: MeasurePlan, judging: Judging, value: number, sd: number): Pick<Reading, 'targetStatus'> {
  if (!judging.zone || Math.abs(value) < plan.definition.judgedFrom) return {}
  return { targetStatus: targetStatus(judging.zone, value, sd, judging.judgement) }
}

/**
 * One reading from a recipe whose landmarks are all there.
 * @returns null where the formula has no value, as for a mid-point that falls on its own base.
 * @throws GeometryError `facing-required` when the formula needs to know where the person faces and nothing says so.
 */
export function takeReading(plan: MeasurePlan, recipe: Recipe, pose: Pose, body: MarkingBody, judging: Judging): Reading | null {
  const inputs = inputsOf(recipe, pose)
  const formula = evaluate(recipe, pose, inputs)
  const isAngle = recipe.unit === 'deg'
  const rawSd = formulaSd(formula, inputs, pose.roll.sd)
  // Adding 0 turns −0 into 0, which would read as a sign.
  const value = (isAngle ? wrapDegrees(toDegrees(radians(formula.value))) : formula.value) + 0
  const sd = isAngle ? toDegrees(radians(rawSd)) : rawSd
  if (!Number.isFinite(value) || !Number.isFinite(sd)) return null
  return {
    measure: plan.definition.id,
    definitionVersion: plan.definition.definitionVersion,
    view: body.view,
    ...sideOf(plan, body),
    value,
    unit: recipe.unit,
    sd,
    low: value - Z95 * sd,
    high: value + Z95 * sd,
    ...statusOf(plan, judging, value, sd),
    warnings: warningsOf(plan, recipe, pose, isTooShort(formula, inputs)),
  }
}
