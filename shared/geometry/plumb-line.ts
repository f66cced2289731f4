import { type Degrees, degrees, type Radians, radians, toDegrees, toRadians } from './angle'
import { GeometryError } from './geometry-error'
import { clickSd } from './landmark-error'
import type { PlumbLine } from './marking'

/** A plumb line shorter than this share of the picture height is refused. */
export const SHORTEST_PLUMB_LINE = 1 / 3
/** Sd of the camera roll when nothing shows the vertical (a design choice of ours). */
export const ASSUMED_ROLL_SD: Degrees = degrees(2)
/** A camera rolled by more than this is more likely a slip. */
export const LARGE_ROLL: Degrees = degrees(15)

/** Camera roll ρ, + when the top of a true vertical leans to picture right, and how sure it is. */
export interface Roll {
  readonly angle: Degrees
  readonly sd: Degrees
  readonly source: 'plumb-line' | 'assumed'
}

/** The roll as the formulas use it, in radians. */
export interface CameraRoll {
  readonly angle: Radians
  readonly sd: Radians
  readonly source: Roll['source']
}

/**
 * Camera roll of a plumb line: atan2(xTop − xBottom, yBottom − yTop), its ends sorted by y. Its sd is that of a segment,
 * √2 · click error / length. Without a plumb line the roll is 0 with the assumed sd.
 * @throws GeometryError `plumb-line-too-short` under a third of the picture height.
 */
export function cameraRoll(plumbLine: PlumbLine | null, pictureHeight: number): CameraRoll {
  if (!plumbLine) return { angle: radians(0), sd: toRadians(ASSUMED_ROLL_SD), source: 'assumed' }
  const { top, bottom } = plumbLine.top.y <= plumbLine.bottom.y
    ? plumbLine
    : { top: plumbLine.bottom, bottom: plumbLine.top }
  const length = Math.hypot(top.x - bottom.x, top.y - bottom.y)
  if (length < pictureHeight * SHORTEST_PLUMB_LINE) {
    throw new GeometryError('plumb-line-too-short', 'The plumb line must span at least a third of the picture height', ['plumbLine'])
  }
  return {
    angle: radians(Math.atan2(top.x - bottom.x, bottom.y - top.y)),
    sd: radians(Math.SQRT2 * clickSd(pictureHeight) / length),
    source: 'plumb-line',
  }
}

/** The roll in degrees, for people. */
export function rollInDegrees(roll: CameraRoll): Roll {
  return { angle: toDegrees(roll.angle), sd: toDegrees(roll.sd), source: roll.source }
}
