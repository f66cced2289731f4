import type { Repeatability } from './landmark-error'
import type { MarkingBody } from './marking'
import { chooseRecipe, explainMissing, MEASURE_PLANS, type MeasurePlan, withhold } from './measure-plan'
import { type Roll, rollInDegrees } from './plumb-line'
import { type Pose, poseOf } from './pose'
import type { Reading, WarningCode, WithheldReading } from './reading'
import type { MeasuredScale } from './scale'
import { frameOf, type Judging, takeReading } from './take-reading'
import { DEFAULT_JUDGEMENT, type TargetJudgement, type TargetZone } from './target'

/** What a clinic may set. */
export interface MeasureOptions {
  /** Its own targets by measure id; null takes the default target away. Limits in the unit of the reading. */
  readonly targets?: Readonly<Record<string, TargetZone | null>>
  readonly judgement?: TargetJudgement
  /** Its own click errors, used for a landmark from 10 repeated markings on. */
  readonly repeatability?: Repeatability
}

/** Everything that a marking yields. */
export interface MeasuredMarking {
  readonly readings: readonly Reading[]
  /** Measures of this view that gave nothing, and why. */
  readonly withheld: readonly WithheldReading[]
  /** Warnings about the picture as a whole; those that concern a reading stand on it too. */
  readonly warnings: readonly WarningCode[]
  readonly roll: Roll
  readonly scale: MeasuredScale | null
}

function judgingOf(plan: MeasurePlan, options: MeasureOptions): Judging {
  const own = options.targets?.[plan.definition.id]
  return {
    zone: own === undefined ? plan.definition.defaultTarget : own,
    judgement: options.judgement ?? DEFAULT_JUDGEMENT,
  }
}

interface PoseReadings {
  readonly readings: readonly Reading[]
  readonly withheld: readonly WithheldReading[]
}

/**
 * The readings of a pose that is already checked and upright.
 * @throws GeometryError `facing-required` when a formula needs to know where the person faces and nothing says so.
 */
export function readPose(pose: Pose, body: MarkingBody, options: MeasureOptions): PoseReadings {
  const frame = frameOf(pose)
  const readings: Reading[] = []
  const gaps: WithheldReading[] = []
  for (const plan of MEASURE_PLANS[body.view]) {
    if (plan.definition.withheldWhen && body.supported) {
      gaps.push(withhold(plan, plan.definition.withheldWhen))
      continue
    }
    const recipe = chooseRecipe(plan, pose)
    if (!recipe) {
      gaps.push(explainMissing(plan, pose))
      continue
    }
    const reading = takeReading(plan, recipe, pose, frame, body.view, judgingOf(plan, options))
    if (reading) readings.push(reading)
    else gaps.push(withhold(plan, 'degenerate'))
  }
  return { readings, withheld: gaps }
}

/**
 * Computes every reading that a marking allows, with its error band, target status and warnings. Missing landmarks give fewer
 * readings, never a wrong one. Pure: the browser and the server get the same numbers.
 * @param body landmarks in pixels of the upright review copy, x right, y down
 * @returns readings in table order; angles in degrees in (−180, 180], lengths in millimetres, ratios plain or in percent
 * @throws GeometryError with a code and the path of the landmark or field at fault
 */
export function measureMarking(body: MarkingBody, options: MeasureOptions = {}): MeasuredMarking {
  const pose = poseOf(body, options.repeatability ?? {})
  const { readings, withheld } = readPose(pose, body, options)
  return { readings, withheld, warnings: pose.warnings, roll: rollInDegrees(pose.roll), scale: pose.scale }
}
