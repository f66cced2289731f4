import { median } from 'simple-statistics'
import { lowPassZeroLag } from './butterworth'
import { GeometryError } from './geometry-error'

/** Longest gap that is bridged, in seconds. */
export const LONGEST_BRIDGED_GAP_S = 0.2
/** Default cut-off of the low-pass, in hertz. Source: Winter, Biomechanics and Motor Control of Human Movement, ch. 3. */
export const DEFAULT_CUTOFF_HZ = 6

/** A value at a frame's own time stamp; null where the frame gave none. */
export interface TimedValue {
  readonly timeS: number
  readonly value: number | null
}

/** A series on an even grid; null inside a gap that was too long to bridge. */
export interface EvenSeries {
  readonly startS: number
  readonly intervalS: number
  readonly values: readonly (number | null)[]
}

export interface SeriesOptions {
  readonly longestGapS: number
  /** null: no smoothing. */
  readonly cutoffHz: number | null
}

export const DEFAULT_SERIES_OPTIONS: SeriesOptions = { longestGapS: LONGEST_BRIDGED_GAP_S, cutoffHz: DEFAULT_CUTOFF_HZ }

interface Known {
  readonly timeS: number
  readonly value: number
}

/** Rounding of time stamps must not cost the last sample. */
const GRID_TOLERANCE = 1e-6

function checkTimes(samples: readonly TimedValue[]): void {
  samples.forEach((sample, index) => {
    const before = samples[index - 1]
    if (!Number.isFinite(sample.timeS) || (sample.value !== null && !Number.isFinite(sample.value))) {
      throw new GeometryError('not-finite', 'A sample of the series is not a number', [String(index)])
    }
    if (before && sample.timeS <= before.timeS) {
      throw new GeometryError('out-of-range', 'Time stamps must rise', [String(index)])
    }
  })
}

function isKnown(sample: TimedValue): sample is Known {
  return sample.value !== null
}

/** Samples spread over an even grid by straight lines between known neighbours that are near enough. */
function spreadEvenly(samples: readonly TimedValue[], intervalS: number, longestGapS: number): EvenSeries {
  const startS = samples[0]?.timeS ?? 0
  const endS = samples[samples.length - 1]?.timeS ?? 0
  const known = samples.filter(isKnown)
  const count = Math.floor((endS - startS) / intervalS + GRID_TOLERANCE) + 1
  const values: (number | null)[] = []
  let next = 0
  for (let index = 0; index < count; index++) {
    const timeS = startS + index * intervalS
    while (next < known.length && (known[next]?.timeS ?? Infinity) < timeS - intervalS * GRID_TOLERANCE) next += 1
    values.push(valueBetween(known[next - 1], known[next], timeS, { intervalS, longestGapS }))
  }
  return { startS, intervalS, values }
}

interface Bridge {
  readonly intervalS: number
  readonly longestGapS: number
}

function valueBetween(before: Known | undefined, after: Known | undefined, timeS: number, bridge: Bridge): number | null {
  if (after && Math.abs(after.timeS - timeS) <= bridge.intervalS * GRID_TOLERANCE) return after.value
  if (!before || !after) return null
  const width = after.timeS - before.timeS
  // Neighbouring frames of a slow clip may lie further apart than the bridge: that is no gap.
  if (width > Math.max(bridge.longestGapS, 1.5 * bridge.intervalS) + GRID_TOLERANCE) return null
  const share = (timeS - before.timeS) / width
  return before.value + share * (after.value - before.value)
}

/** Runs `change` over each stretch without a gap. */
function mapStretches(values: readonly (number | null)[], change: (stretch: readonly number[]) => readonly number[]): (number | null)[] {
  const result: (number | null)[] = []
  let stretch: number[] = []
  const close = () => {
    result.push(...change(stretch))
    stretch = []
  }
  for (const value of values) {
    if (value === null) {
      close()
      result.push(null)
    } else {
      stretch.push(value)
    }
  }
  close()
  return result
}

/**
 * A series made even and smooth. Gaps up to `longestGapS` are bridged by a straight line, longer ones stay gaps; the
 * grid has the median interval of the time stamps; each stretch is low-passed without lag on its own.
 * @param samples in rising order of their frames' time stamps
 * @returns an empty series for fewer than two samples
 * @throws GeometryError `out-of-range` when the time stamps do not rise, `not-finite` for numbers that are none.
 */
export function evenSeries(samples: readonly TimedValue[], options: SeriesOptions = DEFAULT_SERIES_OPTIONS): EvenSeries {
  checkTimes(samples)
  if (samples.length < 2) return { startS: samples[0]?.timeS ?? 0, intervalS: 0, values: [] }
  const intervalS = median(samples.slice(1).map((sample, index) => sample.timeS - (samples[index]?.timeS ?? 0)))
  const even = spreadEvenly(samples, intervalS, options.longestGapS)
  const { cutoffHz } = options
  if (cutoffHz === null) return even
  return { ...even, values: mapStretches(even.values, stretch => lowPassZeroLag(stretch, intervalS, cutoffHz)) }
}
