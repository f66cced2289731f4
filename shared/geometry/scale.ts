import { GeometryError } from './geometry-error'
import { clickSd } from './landmark-error'
import type { Scale } from './marking'

/** Longest scale that is taken at its word: a kilometre is a typing slip. */
const LONGEST_SCALE_MM = 1_000_000
/** Two ends closer than this cannot be told apart. */
const SMALLEST_SCALE_PX = 1e-6

/** Relative sd of a scale's length from which its linear band is not honest any more, as for any divisor. */
export const LARGEST_SCALE_SD = 0.1

/** A known length on the picture. */
export interface MeasuredScale {
  readonly lengthMm: number
  readonly lengthPx: number
  readonly mmPerPx: number
  /** Sd of `lengthPx`: √2 · click error, so the relative sd is √2 · σ / n px. */
  readonly sdPx: number
}

/**
 * The scale of a marking, or null when it has none.
 * @throws GeometryError `scale-length-invalid` unless 0 < length ≤ 1 km, `scale-ends-coincide` when both ends are one point.
 */
export function measureScale(scale: Scale | null, pictureHeight: number): MeasuredScale | null {
  if (!scale) return null
  const { from, to, lengthMm } = scale
  if (!(lengthMm > 0 && lengthMm <= LONGEST_SCALE_MM)) {
    throw new GeometryError('scale-length-invalid', 'The scale needs a length above 0 mm', ['scale', 'lengthMm'])
  }
  const lengthPx = Math.hypot(to.x - from.x, to.y - from.y)
  if (lengthPx < SMALLEST_SCALE_PX) {
    throw new GeometryError('scale-ends-coincide', 'Both ends of the scale lie on one point', ['scale', 'to'])
  }
  return { lengthMm, lengthPx, mmPerPx: lengthMm / lengthPx, sdPx: Math.SQRT2 * clickSd(pictureHeight) }
}
