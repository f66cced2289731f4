import type { Dual } from './dual'
import type { PosePoint } from './pose'

/** Half width of a 95 % band in sd. */
export const Z95 = 1.96

/** What the inputs of one recipe are: its points in order (x, y each), then the scale's length if it uses one. */
export interface BandInputs {
  readonly points: readonly PosePoint[]
  /** Sd of the scale's length in pixels, 0 without a scale. */
  readonly scaleSdPx: number
}

/** Derivative of a formula by the camera roll: turning the points by −dρ moves each by (y, −x) · dρ. */
export function rollDerivative(formula: Dual, points: readonly PosePoint[]): number {
  let derivative = 0
  for (let i = 0; i < points.length; i++) {
    const point = points[i]
    if (!point) continue
    derivative += (formula.gradient[2 * i] ?? 0) * point.y - (formula.gradient[2 * i + 1] ?? 0) * point.x
  }
  return derivative
}

/** Variance from clicking alone: the landmarks and the ends of the scale, first order, all inputs independent. */
export function clickVariance(formula: Dual, inputs: BandInputs): number {
  const { points, scaleSdPx } = inputs
  let variance = 0
  for (let i = 0; i < points.length; i++) {
    const gx = formula.gradient[2 * i] ?? 0
    const gy = formula.gradient[2 * i + 1] ?? 0
    const sd = points[i]?.sd ?? 0
    variance += (gx * gx + gy * gy) * sd * sd
  }
  const byScale = formula.gradient[2 * points.length] ?? 0
  return variance + byScale * byScale * scaleSdPx * scaleSdPx
}

/**
 * Sd of a formula: click errors and roll in quadrature. The plumb line is used for nothing but the roll, so its
 * two ends enter as one independent number; in joint angles the roll derivative is 0 by itself.
 */
export function formulaSd(formula: Dual, inputs: BandInputs, rollSd: number): number {
  const byRoll = rollDerivative(formula, inputs.points) * rollSd
  return Math.sqrt(clickVariance(formula, inputs) + byRoll * byRoll)
}
