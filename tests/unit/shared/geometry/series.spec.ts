import { describe, expect, it } from 'vitest'
import { lowPassZeroLag } from '#shared/geometry/butterworth'
import { evenSeries, type TimedValue } from '#shared/geometry/series'
import { kneeBucklings, longestUpright, settlingTime, shareWithin, summariseSeries, swayOf } from '#shared/geometry/series-summary'
import { referenceFile } from './reference-file'

interface FilterCase {
  readonly rateHz: number
  readonly cutoffHz: number
  readonly values: readonly number[]
  readonly filtered: readonly number[]
}

const { filters } = referenceFile<{ readonly filters: readonly FilterCase[] }>('series-and-trend.json')

describe('lowPassZeroLag', () => {
  // Source: scipy's butter(2, …) with filtfilt, tests/reference/series_and_trend.py.
  it.each(filters.map(item => [item.values.length, item.rateHz, item] as const))('agrees with scipy on %i samples at %f Hz', (_, __, item) => {
    const filtered = lowPassZeroLag(item.values, 1 / item.rateHz, item.cutoffHz)
    expect(filtered).toHaveLength(item.values.length)
    filtered.forEach((value, index) => expect(value).toBeCloseTo(item.filtered[index] ?? Number.NaN, 8))
  })

  it('halves the power at the cut-off after both passes, by the factor 0.802', () => {
    const rate = 200
    const wave = Array.from({ length: 2000 }, (_, index) => Math.sin(2 * Math.PI * 6 * index / rate))
    const filtered = lowPassZeroLag(wave, 1 / rate, 6).slice(500, 1500)
    const amplitude = Math.max(...filtered)
    expect(amplitude).toBeCloseTo(Math.SQRT1_2, 2)
  })

  it('leaves a constant and a straight line as they are', () => {
    const line = Array.from({ length: 30 }, (_, index) => 3 + 0.5 * index)
    lowPassZeroLag(line, 1 / 30, 6).forEach((value, index) => expect(value).toBeCloseTo(line[index] ?? Number.NaN, 1))
    lowPassZeroLag(new Array<number>(30).fill(4), 1 / 30, 6).forEach(value => expect(value).toBeCloseTo(4, 10))
  })

  it('leaves a clip too slow for the cut-off as it is', () => {
    expect(lowPassZeroLag([1, 5, 2, 8, 3], 1 / 10, 6)).toEqual([1, 5, 2, 8, 3])
  })

  it('refuses an interval of nothing', () => {
    expect(() => lowPassZeroLag([1, 2, 3], 0, 6)).toThrow(expect.objectContaining({ code: 'out-of-range' }))
  })
})

const RAW = { longestGapS: 0.2, cutoffHz: null }

function samples(values: readonly (number | null)[], intervalS: number): TimedValue[] {
  return values.map((value, index) => ({ timeS: index * intervalS, value }))
}

describe('evenSeries', () => {
  it('bridges a gap of 0.2 s with a straight line', () => {
    expect(evenSeries(samples([0, null, null, null, 4, 5], 0.05), RAW).values.map(value => value ?? Number.NaN))
      .toEqual([0, 1, 2, 3, 4, 5].map(value => expect.closeTo(value, 9)))
  })

  it('leaves a longer gap a gap', () => {
    expect(evenSeries(samples([0, null, null, null, null, 5, 6], 0.05), RAW).values).toEqual([0, null, null, null, null, 5, 6])
  })

  it('does not reach past its ends', () => {
    expect(evenSeries(samples([null, 1, 2, null], 0.05), RAW).values).toEqual([null, 1, 2, null])
  })

  it('takes the grid from the median interval of the time stamps, not from a nominal rate', () => {
    const even = evenSeries([0, 0.04, 0.08, 0.14, 0.16, 0.2].map(timeS => ({ timeS, value: 10 * timeS })), RAW)
    expect(even.intervalS).toBeCloseTo(0.04, 12)
    expect(even.values).toEqual([0, 0.4, 0.8, 1.2, 1.6, 2].map(value => expect.closeTo(value, 9)))
  })

  it('does not take the frames of a slow clip for gaps', () => {
    expect(evenSeries(samples([1, 2, 3], 0.5), RAW).values).toEqual([1, 2, 3])
  })

  it('smooths each stretch on its own', () => {
    const values = [...new Array<number>(12).fill(1), ...new Array<null>(9).fill(null), ...new Array<number>(12).fill(9)]
    const even = evenSeries(samples(values, 1 / 30))
    expect(even.values[11]).toBeCloseTo(1, 9)
    expect(even.values[21]).toBeCloseTo(9, 9)
  })

  it('is empty for fewer than two samples', () => {
    expect(evenSeries(samples([4], 1)).values).toEqual([])
    expect(evenSeries([]).values).toEqual([])
  })

  it('refuses time stamps that do not rise', () => {
    expect(() => evenSeries([{ timeS: 1, value: 1 }, { timeS: 1, value: 2 }])).toThrow(expect.objectContaining({ code: 'out-of-range' }))
  })
})

const even = (values: readonly (number | null)[], intervalS = 0.1) => ({ startS: 2, intervalS, values })
const ZONE = { low: -8, high: 5 }

describe('summary of a series', () => {
  it('gives mean, SD and range over what is known', () => {
    expect(summariseSeries(even([2, 4, null, 6]))).toEqual({ count: 3, mean: 4, sd: 2, lowest: 2, highest: 6 })
    expect(summariseSeries(even([null]))).toBeNull()
  })

  it('gives the share of the known time within', () => {
    expect(shareWithin({ series: even([0, 1, 9, null]), zone: ZONE })).toBeCloseTo(2 / 3, 12)
  })

  it('finds the longest stretch in which all limits are kept', () => {
    const trunk = { series: even([0, 0, 0, 0, 9, 0, 0]), zone: ZONE }
    const knee = { series: even([0, 99, 0, 0, 0, 0, 0]), zone: { low: -5, high: 10 } }
    const stretch = longestUpright([trunk, knee])
    expect(stretch?.fromS).toBeCloseTo(2.2, 9)
    expect(stretch?.toS).toBeCloseTo(2.3, 9)
  })

  it('ends an upright stretch at a gap', () => {
    const stretch = longestUpright([{ series: even([0, 0, null, 0, 0, 0]), zone: ZONE }])
    expect(stretch?.fromS).toBeCloseTo(2.3, 9)
    expect(stretch?.toS).toBeCloseTo(2.5, 9)
  })

  it('has no upright stretch where nothing is upright', () => {
    expect(longestUpright([{ series: even([9, null]), zone: ZONE }])).toBeNull()
  })

  it('walks the path of the trunk without crossing gaps', () => {
    expect(swayOf(even([0, 2, 1, null, 8, 9]))?.path).toBeCloseTo(4, 12)
  })

  it('counts a knee that gives way once, until it is back', () => {
    const flexion = even([5, 5, 12, 20, 22, 18, 5, 5, 16.1, 5])
    expect(kneeBucklings(flexion, 10)).toEqual([expect.closeTo(2.3, 9), expect.closeTo(2.8, 9)])
  })

  it('does not call a slow bend a buckling', () => {
    expect(kneeBucklings(even([5, 6.5, 8, 9.5, 11, 12.5, 14, 15.5, 17, 18.5], 0.1), 10)).toEqual([])
  })

  it('does not call a quick bend within the limit a buckling', () => {
    expect(kneeBucklings(even([-5, 0, 6, 9]), 10)).toEqual([])
  })

  it('gives the time from standing up until the value stays in', () => {
    const series = even([20, 12, 4, 6, 4, 3, 2, 1, 1])
    expect(settlingTime({ series, zone: ZONE }, 2.1, 0.3)).toBeCloseTo(0.3, 9)
    expect(settlingTime({ series, zone: ZONE }, 2.1, 2)).toBeNull()
  })
})
