import { GeometryError } from './geometry-error'
import type { EvenSeries } from './series'
import type { TargetZone } from './target'

/** Plain statistics of one series; null without a value. */
export interface SeriesSummary {
  readonly count: number
  readonly mean: number
  /** Sample standard deviation (n − 1); 0 for one value. */
  readonly sd: number
  readonly lowest: number
  readonly highest: number
}

/** A series with the limits that it must keep. */
export interface LimitedSeries {
  readonly series: EvenSeries
  readonly zone: TargetZone
}

/** A stretch of time in seconds of the clip. */
export interface Stretch {
  readonly fromS: number
  readonly toS: number
}

/** Knee flexion that rises by more than this within `BUCKLING_WINDOW_S`, past its limit, is a buckling (a design choice of ours). */
export const BUCKLING_RISE = 10
export const BUCKLING_WINDOW_S = 0.5

const TIME_TOLERANCE_S = 1e-9

function knownValues(series: EvenSeries): number[] {
  return series.values.filter(value => value !== null)
}

function timeAt(series: EvenSeries, index: number): number {
  return series.startS + index * series.intervalS
}

function isInside(value: number | null | undefined, zone: TargetZone): boolean {
  return value !== null && value !== undefined && value >= (zone.low ?? -Infinity) && value <= (zone.high ?? Infinity)
}

/** Mean, SD and range of the values outside gaps, or null when there are none. */
export function summariseSeries(series: EvenSeries): SeriesSummary | null {
  const values = knownValues(series)
  if (values.length === 0) return null
  const mean = values.reduce((sum, value) => sum + value, 0) / values.length
  const squares = values.reduce((sum, value) => sum + (value - mean) ** 2, 0)
  return {
    count: values.length,
    mean,
    sd: values.length > 1 ? Math.sqrt(squares / (values.length - 1)) : 0,
    lowest: values.reduce((low, value) => Math.min(low, value), Infinity),
    highest: values.reduce((high, value) => Math.max(high, value), -Infinity),
  }
}

/** Share of the known time in which the value lies in the zone, 0 to 1; null without a value. */
export function shareWithin({ series, zone }: LimitedSeries): number | null {
  const values = knownValues(series)
  return values.length === 0 ? null : values.filter(value => isInside(value, zone)).length / values.length
}

/**
 * The longest stretch in which all series keep their limits at once; a gap in any of them ends it. Null when there is none.
 * @throws GeometryError `shape-mismatch` unless all series share one grid.
 */
export function longestUpright(limited: readonly LimitedSeries[]): Stretch | null {
  const first = limited[0]?.series
  if (!first) return null
  const isOneGrid = limited.every(({ series }) =>
    series.startS === first.startS && series.intervalS === first.intervalS && series.values.length === first.values.length)
  if (!isOneGrid) throw new GeometryError('shape-mismatch', 'The series must share one time grid')
  let best: Stretch | null = null
  let from: number | null = null
  for (let index = 0; index < first.values.length; index++) {
    const upright = limited.every(({ series, zone }) => isInside(series.values[index], zone))
    from = upright ? from ?? index : null
    if (from === null) continue
    const stretch = { fromS: timeAt(first, from), toS: timeAt(first, index) }
    if (!best || stretch.toS - stretch.fromS > best.toS - best.fromS + TIME_TOLERANCE_S) best = stretch
  }
  return best
}

/** Sway of an angle: its SD and the length of the path it runs, in its unit; gaps are not walked over. */
export function swayOf(series: EvenSeries): { readonly sd: number, readonly path: number } | null {
  const summary = summariseSeries(series)
  if (!summary) return null
  let path = 0
  for (let index = 1; index < series.values.length; index++) {
    const before = series.values[index - 1]
    const value = series.values[index]
    if (typeof before === 'number' && typeof value === 'number') path += Math.abs(value - before)
  }
  return { sd: summary.sd, path }
}

/** How far the value at `index` lies above the lowest of the window before it; a gap begins a new window. */
function riseAt(series: EvenSeries, index: number, windowS: number): number {
  const value = series.values[index]
  if (typeof value !== 'number') return 0
  let lowest = value
  for (let back = index; back >= 0 && (index - back) * series.intervalS <= windowS + TIME_TOLERANCE_S; back--) {
    const earlier = series.values[back]
    if (typeof earlier !== 'number') break
    lowest = Math.min(lowest, earlier)
  }
  return value - lowest
}

/**
 * Times in seconds at which a knee buckled: flexion rose by more than 10° within 0.5 s and past `limit`. One giving way counts once,
 * until the knee is back within the limit.
 */
export function kneeBucklings(kneeFlexion: EvenSeries, limit: number): readonly number[] {
  const times: number[] = []
  let isBuckled = false
  kneeFlexion.values.forEach((value, index) => {
    if (value === null || value <= limit) {
      isBuckled = false
    } else if (!isBuckled && riseAt(kneeFlexion, index, BUCKLING_WINDOW_S) > BUCKLING_RISE) {
      isBuckled = true
      times.push(timeAt(kneeFlexion, index))
    }
  })
  return times
}

/**
 * Settling time after standing up: seconds from `stoodUpAtS` until all later values stay in the zone for at least `holdS`.
 * Null when that never happens or the clip ends before the hold is over.
 */
export function settlingTime({ series, zone }: LimitedSeries, stoodUpAtS: number, holdS: number): number | null {
  let from: number | null = null
  for (let index = 0; index < series.values.length; index++) {
    const timeS = timeAt(series, index)
    if (timeS < stoodUpAtS - TIME_TOLERANCE_S) continue
    from = isInside(series.values[index], zone) ? from ?? timeS : null
    if (from !== null && timeS - from >= holdS - TIME_TOLERANCE_S) return from - stoodUpAtS
  }
  return null
}
