import jStat from 'jstat'
import { median } from 'simple-statistics'
import { GeometryError } from './geometry-error'
import type { Interval } from './interval'

/** Fewest points from which a trend is given. */
export const FEWEST_TREND_POINTS = 4

export interface TrendPoint {
  readonly x: number
  readonly y: number
}

/** A robust trend: y rises by `slope` for each step of x. */
export interface Trend {
  readonly slope: number
  readonly intercept: number
  readonly interval: Interval
}

function tieTerm(values: readonly number[]): number {
  const counts = new Map<number, number>()
  for (const value of values) counts.set(value, (counts.get(value) ?? 0) + 1)
  return [...counts.values()].reduce((sum, t) => sum + t * (t - 1) * (2 * t + 5), 0)
}

function slopesOf(points: readonly TrendPoint[]): number[] {
  return points
    .flatMap((a, index) => points.slice(index + 1).filter(b => b.x !== a.x).map(b => (b.y - a.y) / (b.x - a.x)))
    .sort((a, b) => a - b)
}

/** Standard deviation of Kendall's S, corrected for ties. */
function kendallSd(points: readonly TrendPoint[]): number {
  const n = points.length
  const variance = (n * (n - 1) * (2 * n + 5) - tieTerm(points.map(point => point.x)) - tieTerm(points.map(point => point.y))) / 18
  return Math.sqrt(Math.max(0, variance))
}

/**
 * Theil–Sen slope, the median of the slopes of all pairs, with Sen's rank-based interval.
 * @returns null under four points or when all lie at one x. The caller keeps to points at like support.
 * @throws GeometryError `not-finite` for a number that is none.
 * Source: Sen 1968, J Am Stat Assoc 63:1379–1389.
 */
export function theilSen(points: readonly TrendPoint[], confidence = 0.95): Trend | null {
  if (!points.every(point => Number.isFinite(point.x) && Number.isFinite(point.y))) {
    throw new GeometryError('not-finite', 'A point of the trend is not a number')
  }
  if (points.length < FEWEST_TREND_POINTS) return null
  const slopes = slopesOf(points)
  if (slopes.length === 0) return null
  const slope = median(slopes)
  const reach = jStat.normal.inv((1 + confidence) / 2, 0, 1) * kendallSd(points)
  const low = Math.max(Math.round((slopes.length - reach) / 2) - 1, 0)
  const high = Math.min(Math.round((slopes.length + reach) / 2), slopes.length - 1)
  return {
    slope,
    intercept: median(points.map(point => point.y)) - slope * median(points.map(point => point.x)),
    interval: { low: slopes[low] ?? slope, high: slopes[high] ?? slope },
  }
}
