import { toRadians } from './angle'
import { type CheckedLandmark, checkMarking } from './check-marking'
import type { AxisSign } from './direction'
import { type Repeatability, landmarkSd } from './landmark-error'
import type { LandmarkId, Side } from './landmarks'
import type { Facing, MarkingBody } from './marking'
import { type CameraRoll, cameraRoll, LARGE_ROLL } from './plumb-line'
import type { WarningCode } from './reading'
import { LARGEST_SCALE_SD, measureScale, type MeasuredScale } from './scale'

/** A landmark turned upright about the picture centre. Its sd is the same in every direction, so turning leaves it. */
export interface PosePoint {
  /** Pixels from the picture centre after roll correction, x right, y down. */
  readonly x: number
  readonly y: number
  /** Sd per coordinate in pixels. */
  readonly sd: number
}

/** A body with the conventions of MEASUREMENTS section 1 applied once: checked, upright, signs known. */
export interface Pose {
  readonly points: ReadonlyMap<LandmarkId, PosePoint>
  readonly roll: CameraRoll
  readonly scale: MeasuredScale | null
  /** `s`, or null when neither the person nor the foot says where the body faces. */
  readonly facing: AxisSign | null
  /** `m` of a frontal view. */
  readonly viewSign: AxisSign
  /** The stated near side of a sagittal view, else null. */
  readonly nearSide: Side | null
  /** Landmarks of pairs whose left and right look exchanged. */
  readonly swapped: ReadonlySet<LandmarkId>
  /** Warnings about the picture as a whole, without those of single readings. */
  readonly warnings: readonly WarningCode[]
}

type Points = ReadonlyMap<LandmarkId, PosePoint>

const PAIRS: readonly (readonly [LandmarkId, LandmarkId])[] = [
  ['acromionLeft', 'acromionRight'],
  ['asisLeft', 'asisRight'],
  ['psisLeft', 'psisRight'],
  ['kneeCentreLeft', 'kneeCentreRight'],
  ['ankleCentreLeft', 'ankleCentreRight'],
  ['tragusLeft', 'tragusRight'],
  ['elbowLeft', 'elbowRight'],
]

const NONE: ReadonlySet<LandmarkId> = new Set()

function uprightPoints(marks: readonly CheckedLandmark[], body: MarkingBody, angle: number, repeatability: Repeatability): Points {
  const cos = Math.cos(angle)
  const sin = Math.sin(angle)
  const points = new Map<LandmarkId, PosePoint>()
  for (const mark of marks) {
    const x = mark.x - body.width / 2
    const y = mark.y - body.height / 2
    points.set(mark.landmark.id, {
      x: x * cos + y * sin,
      y: y * cos - x * sin,
      sd: mark.sd ?? landmarkSd(mark.landmark, body.height, body.clothed ?? false, repeatability),
    })
  }
  return points
}

/** Where the foot points: sign(xFifthMetatarsal − xHeel), or null when it is not marked or stands on end. */
function facingOfFoot(points: Points): AxisSign | null {
  const heel = points.get('heel')
  const metatarsal = points.get('fifthMetatarsal')
  if (!heel || !metatarsal || heel.x === metatarsal.x) return null
  return metatarsal.x > heel.x ? 1 : -1
}

/** The side that faces the camera: unmirrored, facing picture right shows the person's right side. */
export function nearSide(facing: Facing, mirrored: boolean): Side {
  return (facing === 'right') === mirrored ? 'left' : 'right'
}

function facingOf(body: MarkingBody, foot: AxisSign | null): AxisSign | null {
  if (body.facing === undefined) return foot
  return body.facing === 'right' ? 1 : -1
}

function sagittalWarnings(body: MarkingBody, facing: AxisSign | null, foot: AxisSign | null): WarningCode[] {
  const warnings: WarningCode[] = []
  if (facing !== null && foot !== null && facing !== foot) warnings.push('facing-mismatch')
  if (facing !== null && body.side && body.side !== nearSide(facing === 1 ? 'right' : 'left', body.mirrored ?? false)) {
    warnings.push('maybe-mirrored')
  }
  return warnings
}

function setUpWarnings(roll: CameraRoll, scale: MeasuredScale | null): WarningCode[] {
  const warnings: WarningCode[] = []
  if (roll.source === 'assumed') warnings.push('no-plumb-line')
  if (Math.abs(roll.angle) > toRadians(LARGE_ROLL)) warnings.push('large-roll')
  if (scale && scale.sdPx > LARGEST_SCALE_SD * scale.lengthPx) warnings.push('scale-too-short')
  return warnings
}

function swappedLandmarks(points: Points, viewSign: AxisSign): ReadonlySet<LandmarkId> {
  const swapped = PAIRS.filter(([leftId, rightId]) => {
    const left = points.get(leftId)
    const right = points.get(rightId)
    return left !== undefined && right !== undefined && viewSign * (left.x - right.x) < 0
  })
  return swapped.length === 0 ? NONE : new Set(swapped.flat())
}

function frontalSign(body: MarkingBody): AxisSign {
  return (body.view === 'frontal-posterior') === (body.mirrored ?? false) ? 1 : -1
}

/**
 * Applies the conventions of MEASUREMENTS section 1 to a body: checks it, takes roll and scale, turns the points by −ρ about
 * the picture centre, finds facing and view sign, and warns.
 * @throws GeometryError as `checkMarking`, `cameraRoll` and `measureScale` do.
 */
export function poseOf(body: MarkingBody, repeatability: Repeatability): Pose {
  const marks = checkMarking(body)
  const roll = cameraRoll(body.plumbLine ?? null, body.height)
  const scale = measureScale(body.scale ?? null, body.height)
  const points = uprightPoints(marks, body, roll.angle, repeatability)
  const isSagittal = body.view === 'sagittal'
  const foot = isSagittal ? facingOfFoot(points) : null
  const facing = isSagittal ? facingOf(body, foot) : null
  const viewSign = frontalSign(body)
  const swapped = isSagittal ? NONE : swappedLandmarks(points, viewSign)
  return {
    points,
    roll,
    scale,
    facing,
    viewSign,
    nearSide: isSagittal ? body.side ?? null : null,
    swapped,
    warnings: [
      ...(isSagittal ? sagittalWarnings(body, facing, foot) : []),
      ...(swapped.size > 0 ? ['left-right-swapped' as const] : []),
      ...setUpWarnings(roll, scale),
    ],
  }
}
