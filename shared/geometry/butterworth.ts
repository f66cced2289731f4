import { GeometryError } from './geometry-error'

/** A second-order filter section: y[n] = b0 x[n] + b1 x[n−1] + b2 x[n−2] − a1 y[n−1] − a2 y[n−2]. */
interface Section {
  readonly b0: number
  readonly b1: number
  readonly b2: number
  readonly a1: number
  readonly a2: number
}

/**
 * Running a second-order filter both ways lowers its −3 dB point by this factor, so the cut-off is raised first.
 * Source: Winter, Biomechanics and Motor Control of Human Movement, ch. 3: (√2 − 1)^(1/4).
 */
export const DOUBLE_PASS_FACTOR = 0.802

/** Samples mirrored at each end before filtering, as scipy's `filtfilt` does for three coefficients. */
const PADDING = 9

/** Second-order Butterworth low-pass by the bilinear transform; `ratio` is cut-off over half the sampling rate. */
function lowPassSection(ratio: number): Section {
  const warped = Math.tan(Math.PI * ratio / 2)
  const square = warped * warped
  const norm = 1 / (1 + Math.SQRT2 * warped + square)
  return { b0: square * norm, b1: 2 * square * norm, b2: square * norm, a1: 2 * (square - 1) * norm, a2: (1 - Math.SQRT2 * warped + square) * norm }
}

/** One pass, begun in the steady state of the first sample so that the filter does not ring at the start. */
function filterOnce(section: Section, values: readonly number[]): number[] {
  const { b0, b1, b2, a1, a2 } = section
  const first = values[0] ?? 0
  let s1 = (1 - b0) * first
  let s2 = (b2 - a2) * first
  return values.map((value) => {
    const filtered = b0 * value + s1
    s1 = b1 * value - a1 * filtered + s2
    s2 = b2 * value - a2 * filtered
    return filtered
  })
}

/** Odd extension: turned by half a turn about the end points, which keeps value and slope there. */
function extended(values: readonly number[], padding: number): number[] {
  const first = values[0] ?? 0
  const last = values[values.length - 1] ?? 0
  const before = values.slice(1, padding + 1).reverse().map(value => 2 * first - value)
  const after = values.slice(-padding - 1, -1).reverse().map(value => 2 * last - value)
  return [...before, ...values, ...after]
}

/**
 * Zero-lag low-pass: a second-order Butterworth filter run forwards and backwards, its cut-off divided by 0.802 so that the
 * result falls to −3 dB at `cutoffHz`. Equals scipy's `butter(2, …)` with `filtfilt`.
 * @param values evenly spaced, without gaps
 * @param intervalS time between two samples in seconds
 * @returns as many values; unchanged when the raised cut-off lies at or above half the sampling rate, where there is nothing
 * to take away, or when there are fewer than three values.
 * @throws GeometryError `out-of-range` unless interval and cut-off are above 0, `not-finite` for a value that is none.
 */
export function lowPassZeroLag(values: readonly number[], intervalS: number, cutoffHz: number): readonly number[] {
  if (!(intervalS > 0) || !(cutoffHz > 0)) throw new GeometryError('out-of-range', 'Interval and cut-off must be above 0')
  if (!values.every(Number.isFinite)) throw new GeometryError('not-finite', 'A value of the series is not a number')
  const ratio = 2 * intervalS * cutoffHz / DOUBLE_PASS_FACTOR
  if (ratio >= 1 || values.length < 3) return values
  const section = lowPassSection(ratio)
  const padding = Math.min(PADDING, values.length - 1)
  const forwards = filterOnce(section, extended(values, padding))
  const backwards = filterOnce(section, forwards.reverse()).reverse()
  return backwards.slice(padding, padding + values.length)
}
