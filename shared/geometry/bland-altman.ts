import jStat from 'jstat'
import { Z95 } from './error-band'
import { GeometryError } from './geometry-error'
import type { Interval } from './interval'

/** Agreement of two ways to measure the same things. */
export interface BlandAltman {
  readonly count: number
  /** Mean of first less second. */
  readonly bias: number
  readonly biasInterval: Interval
  /** SD of the differences (n − 1). */
  readonly sd: number
  /** bias − 1.96 SD and bias + 1.96 SD. */
  readonly limits: Interval
  readonly lowLimitInterval: Interval
  readonly highLimitInterval: Interval
  /** For the plot: mean and difference of each pair. */
  readonly points: readonly { readonly mean: number, readonly difference: number }[]
}

function around(centre: number, halfWidth: number): Interval {
  return { low: centre - halfWidth, high: centre + halfWidth }
}

/**
 * Bias and limits of agreement with their confidence intervals.
 * @throws GeometryError `shape-mismatch` for unequal lengths, `not-enough-data` under two pairs, `not-finite`.
 * Source: Bland & Altman 1986, Lancet 1:307–310; standard error of the limits, s · √(1/n + 1.96²/(2(n − 1))): 1999, Stat Methods
 * Med Res 8:135–160.
 */
export function blandAltman(first: readonly number[], second: readonly number[], confidence = 0.95): BlandAltman {
  if (first.length !== second.length) throw new GeometryError('shape-mismatch', 'Both series need as many values')
  if (first.length < 2) throw new GeometryError('not-enough-data', 'Limits of agreement need two pairs')
  if (![...first, ...second].every(Number.isFinite)) throw new GeometryError('not-finite', 'A value is not a number')
  const points = first.map((value, index) => {
    const other = second[index] ?? Number.NaN
    return { mean: (value + other) / 2, difference: value - other }
  })
  const n = points.length
  const bias = points.reduce((sum, point) => sum + point.difference, 0) / n
  const sd = Math.sqrt(points.reduce((sum, point) => sum + (point.difference - bias) ** 2, 0) / (n - 1))
  const t = jStat.studentt.inv((1 + confidence) / 2, n - 1)
  const limits = around(bias, Z95 * sd)
  const limitError = t * sd * Math.sqrt(1 / n + Z95 ** 2 / (2 * (n - 1)))
  return {
    count: n,
    bias,
    biasInterval: around(bias, t * sd / Math.sqrt(n)),
    sd,
    limits,
    lowLimitInterval: around(limits.low, limitError),
    highLimitInterval: around(limits.high, limitError),
    points,
  }
}
