import { type Degrees, radians, toDegrees, toRadians } from './angle'
import { GeometryError } from './geometry-error'

function isQuarterTurn(angle: Degrees): boolean {
  return Math.abs(Math.cos(toRadians(angle))) < 1e-9
}

/**
 * Angle to the vertical that the picture shows when the plane of motion is turned by `turn` out of the picture plane:
 * tan θ′ = tan θ · cos φ. Angles past 90° stay in their quadrant. Source: orthographic projection.
 */
export function projectedAngle(trueAngle: Degrees, turn: Degrees): Degrees {
  const angle = toRadians(trueAngle)
  return toDegrees(radians(Math.atan2(Math.sin(angle) * Math.cos(toRadians(turn)), Math.cos(angle))))
}

/**
 * True angle behind a shown one for a person turned by about `turn`: the inverse of `projectedAngle`.
 * @throws GeometryError `out-of-range` at a quarter turn, where the picture shows nothing of the motion.
 */
export function unprojectedAngle(shown: Degrees, turn: Degrees): Degrees {
  if (isQuarterTurn(turn)) throw new GeometryError('out-of-range', 'At a quarter turn the motion cannot be seen', ['turn'])
  const angle = toRadians(shown)
  return toDegrees(radians(Math.atan2(Math.sin(angle) / Math.cos(toRadians(turn)), Math.cos(angle))))
}

/**
 * Shoulder tilt that a trunk turned by ψ fakes when the shoulders lie `heightM` above the optical axis of a camera at
 * `distanceM`: tan t = h · tan ψ / Z. Lengths in one unit. First order in shoulder width over distance.
 * @throws GeometryError `out-of-range` unless the distance is above 0 and the turn under 90°.
 */
export function falseTilt(heightM: number, turn: Degrees, distanceM: number): Degrees {
  if (!(distanceM > 0)) throw new GeometryError('out-of-range', 'The camera distance must be above 0', ['distanceM'])
  if (Math.abs(turn) >= 90) throw new GeometryError('out-of-range', 'The turn must be under 90°', ['turn'])
  return toDegrees(radians(Math.atan(heightM * Math.tan(toRadians(turn)) / distanceM)))
}
