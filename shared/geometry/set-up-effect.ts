import { type Degrees, toRadians } from './angle'
import { GeometryError } from './geometry-error'
import type { LandmarkId, Side } from './landmarks'
import type { MarkingBody } from './marking'
import { type MeasureOptions, readPose } from './measure-marking'
import { correctedOffset } from './parallax'
import { type Pose, poseOf, type PosePoint } from './pose'
import type { Unit } from './reading'

/** Turns from which the picture shows too little of the motion to say anything. */
const LARGEST_TURN = 75

/** What a poor set-up does to one reading. */
export interface SetUpEffect {
  readonly measure: string
  readonly side?: Side
  readonly unit: Unit
  /** As it reads from the picture. */
  readonly shown: number
  /** As it would read with the set-up undone. */
  readonly corrected: number
}

function mapPose(pose: Pose, change: (point: PosePoint, id: LandmarkId) => PosePoint): Pose {
  return { ...pose, points: new Map([...pose.points].map(([id, point]) => [id, change(point, id)])) }
}

function effectsOf(body: MarkingBody, options: MeasureOptions, undo: (pose: Pose) => Pose): readonly SetUpEffect[] {
  const pose = poseOf(body, options.repeatability ?? {})
  const corrected = readPose(undo(pose), body, options).readings
  return readPose(pose, body, options).readings.flatMap((one) => {
    const other = corrected.find(item => item.measure === one.measure && item.side === one.side && item.unit === one.unit)
    if (!other) return []
    const effect = { measure: one.measure, unit: one.unit, shown: one.value, corrected: other.value }
    return [one.side ? { ...effect, side: one.side } : effect]
  })
}

/**
 * What every reading would be if the person was turned out of the picture plane by about `turn`: distances across shrink by cos φ,
 * so they are stretched back. Heights stay. A first look, not a correction to store.
 * @throws GeometryError `out-of-range` for a turn over 75°, and as `measureMarking` does.
 * Source: orthographic projection, tan θ′ = tan θ · cos φ.
 */
export function effectOfTurn(body: MarkingBody, turn: Degrees, options: MeasureOptions = {}): readonly SetUpEffect[] {
  if (!(Math.abs(turn) <= LARGEST_TURN)) throw new GeometryError('out-of-range', `The turn must be at most ${LARGEST_TURN}°`, ['turn'])
  const shrink = Math.cos(toRadians(turn))
  return effectsOf(body, options, pose => mapPose(pose, point => ({ ...point, x: point.x / shrink })))
}

/**
 * What every reading would be if some landmarks lie nearer to the camera than the plane of the others: they look further from
 * the picture centre than they are, so they are drawn back. The optical axis is taken to meet the picture in its centre.
 * @param distance from the camera to the plane
 * @param nearer how much nearer the landmarks are, in the unit of `distance`; negative: farther
 * @throws GeometryError `out-of-range` for landmarks at or behind the camera, and as `measureMarking` does.
 */
export function effectOfNearness(
  body: MarkingBody,
  landmarks: readonly LandmarkId[],
  { distance, nearer }: { readonly distance: number, readonly nearer: number },
  options: MeasureOptions = {},
): readonly SetUpEffect[] {
  const draw = (offset: number) => correctedOffset(offset, distance, nearer)
  return effectsOf(body, options, pose => mapPose(pose, (point, id) => (
    landmarks.includes(id) ? { ...point, x: draw(point.x), y: draw(point.y) } : point
  )))
}
