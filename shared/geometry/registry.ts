import type { View } from './landmarks'
import type { MeasureDefinition } from './measure-definition'
import { ankleDorsiflexion } from './measures/ankle-dorsiflexion'
import { armSupportToRib } from './measures/arm-support-to-rib'
import { axillaClearance } from './measures/axilla-clearance'
import { centreOfMassOffset } from './measures/centre-of-mass-offset'
import { craniovertebralAngle } from './measures/craniovertebral-angle'
import { elbowUnderShoulder } from './measures/elbow-under-shoulder'
import { frontalKneeAngle } from './measures/frontal-knee-angle'
import { gazeAngle } from './measures/gaze-angle'
import { headTilt } from './measures/head-tilt'
import { hipFlexion } from './measures/hip-flexion'
import { kneeFlexion } from './measures/knee-flexion'
import { midlineShift } from './measures/midline-shift'
import { pelvicTilt } from './measures/pelvic-tilt'
import { plumbOffsetAcromion } from './measures/plumb-offset-acromion'
import { plumbOffsetEar } from './measures/plumb-offset-ear'
import { plumbOffsetGreaterTrochanter } from './measures/plumb-offset-greater-trochanter'
import { plumbOffsetKnee } from './measures/plumb-offset-knee'
import { shankInclination } from './measures/shank-inclination'
import { shoulderTilt } from './measures/shoulder-tilt'
import { stanceWidthRatio } from './measures/stance-width-ratio'
import { thighClearance } from './measures/thigh-clearance'
import { thighInclination } from './measures/thigh-inclination'
import { trunkInclination } from './measures/trunk-inclination'
import { trunkLean } from './measures/trunk-lean'
import { trunkOnPelvis } from './measures/trunk-on-pelvis'

const DEFINITIONS = [
  trunkInclination,
  hipFlexion,
  kneeFlexion,
  thighInclination,
  shankInclination,
  ankleDorsiflexion,
  craniovertebralAngle,
  gazeAngle,
  plumbOffsetEar,
  plumbOffsetAcromion,
  plumbOffsetGreaterTrochanter,
  plumbOffsetKnee,
  elbowUnderShoulder,
  centreOfMassOffset,
  axillaClearance,
  thighClearance,
  armSupportToRib,
  trunkLean,
  shoulderTilt,
  pelvicTilt,
  headTilt,
  trunkOnPelvis,
  midlineShift,
  frontalKneeAngle,
  stanceWidthRatio,
] as const

export type MeasureId = (typeof DEFINITIONS)[number]['id']

/** Every measure, in the order in which tables show them. A new one is one file under `measures/` and one line above. */
export const MEASURES: readonly MeasureDefinition<MeasureId>[] = DEFINITIONS

const BY_ID: ReadonlyMap<string, MeasureDefinition<MeasureId>> = new Map(MEASURES.map(measure => [measure.id, measure]))

/** The measure of that id, or null when there is none. */
export function findMeasure(id: string): MeasureDefinition<MeasureId> | null {
  return BY_ID.get(id) ?? null
}

/** The measures that a view can give, in table order. */
export function measuresOf(view: View): readonly MeasureDefinition<MeasureId>[] {
  return MEASURES.filter(measure => measure.recipes.some(recipe => recipe.views.includes(view)))
}
