import { type Degrees, radians, toDegrees } from './angle'
import { GeometryError } from './geometry-error'

declare const imagePointBrand: unique symbol

/** A place on the upright review copy in its own pixels: origin top left, x right, y down, fractions allowed. */
export type ImagePoint = { readonly x: number, readonly y: number } & { readonly [imagePointBrand]: 'image' }

/** Marks a pair of review-copy pixels as a picture point. */
export function imagePoint(x: number, y: number): ImagePoint {
  return { x, y } as ImagePoint
}

/** Distance in pixels. */
export function distance(a: ImagePoint, b: ImagePoint): number {
  return Math.hypot(b.x - a.x, b.y - a.y)
}

export function midpoint(a: ImagePoint, b: ImagePoint): ImagePoint {
  return imagePoint((a.x + b.x) / 2, (a.y + b.y) / 2)
}

/**
 * Unsigned angle at `vertex` between the rays to `a` and `b`.
 * @returns degrees in [0, 180]. Independent of the order of `a` and `b`.
 * @throws GeometryError `landmarks-coincide` when `a` or `b` equals `vertex`.
 * Source: atan2(|cross|, dot), stable near 0 and 180 where acos is not.
 */
export function angleAt(vertex: ImagePoint, a: ImagePoint, b: ImagePoint): Degrees {
  const ax = a.x - vertex.x
  const ay = a.y - vertex.y
  const bx = b.x - vertex.x
  const by = b.y - vertex.y
  if ((ax === 0 && ay === 0) || (bx === 0 && by === 0)) {
    throw new GeometryError('landmarks-coincide', 'An angle needs two rays: a point lies on the vertex')
  }
  return toDegrees(radians(Math.atan2(Math.abs(ax * by - ay * bx), ax * bx + ay * by)))
}
