import { GeometryError } from './geometry-error'

function factor(distance: number, nearer: number): number {
  if (!(distance > 0) || !(nearer < distance)) {
    throw new GeometryError('out-of-range', 'The point must lie in front of the camera', ['nearer'])
  }
  return distance / (distance - nearer)
}

/**
 * Where a point seems to lie in the plane of the scale when it is really `nearer` to the camera than that plane:
 * x′ = x · Z / (Z − dz), x counted from the optical axis. `distance` (camera to plane) and `nearer` share one unit; a point
 * behind the plane has a negative `nearer`.
 * @throws GeometryError `out-of-range` for a point at or behind the camera. Source: pinhole camera, similar triangles.
 */
export function apparentOffset(offset: number, distance: number, nearer: number): number {
  return offset * factor(distance, nearer)
}

/** The true offset of a point that seems to lie at `apparent`: the inverse of `apparentOffset`. */
export function correctedOffset(apparent: number, distance: number, nearer: number): number {
  return apparent / factor(distance, nearer)
}
