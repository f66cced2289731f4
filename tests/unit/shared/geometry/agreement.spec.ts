import { describe, expect, it } from 'vitest'
import { blandAltman } from '#shared/geometry/bland-altman'
import { type IccForm, mdc95FromSem, raterAgreement, semFromReliability } from '#shared/geometry/icc'
import { kappa } from '#shared/geometry/kappa'
import { theilSen } from '#shared/geometry/theil-sen'
import { referenceFile } from './reference-file'

const FORMS = ['1,1', '2,1', '3,1', '1,k', '2,k', '3,k'] as const

// Source: Shrout & Fleiss 1979, Psychol Bull 86:420–428, Table 2.
const SHROUT_FLEISS = [[9, 2, 5, 8], [6, 1, 3, 2], [8, 4, 6, 8], [7, 1, 2, 6], [10, 5, 6, 9], [6, 2, 4, 7]]
const SHROUT_FLEISS_ICC: Readonly<Record<IccForm, number>> = { '1,1': 0.1657, '2,1': 0.2898, '3,1': 0.7148, '1,k': 0.4428, '2,k': 0.6201, '3,k': 0.9093 }

interface AgreementFixture {
  readonly icc: readonly { readonly ratings: readonly (readonly number[])[], readonly icc: Readonly<Record<IccForm, readonly [number, number, number]>> }[]
  readonly kappa: {
    readonly counts: readonly (readonly number[])[]
    readonly none: readonly [number, number]
    readonly linear: readonly [number, number]
    readonly quadratic: readonly [number, number]
  }
}

// Source: R's psych 2.2.9 and vcd, tests/reference/agreement.R.
const BY_R = referenceFile<AgreementFixture>('agreement.json')

describe('raterAgreement', () => {
  it.each(FORMS)('gives ICC(%s) of the published table', (form) => {
    expect(raterAgreement(SHROUT_FLEISS).icc[form].value).toBeCloseTo(SHROUT_FLEISS_ICC[form], 4)
  })

  it('gives the published intervals', () => {
    const { icc } = raterAgreement(SHROUT_FLEISS)
    expect(icc['2,1'].interval.low).toBeCloseTo(0.0188, 4)
    expect(icc['2,1'].interval.high).toBeCloseTo(0.7611, 4)
    expect(icc['3,1'].interval.low).toBeCloseTo(0.3425, 4)
    expect(icc['3,1'].interval.high).toBeCloseTo(0.9459, 4)
  })

  it('gives SEM and MDC95 of the published table', () => {
    const agreement = raterAgreement(SHROUT_FLEISS)
    expect(agreement.semAgreement).toBeCloseTo(2.5028, 4)
    expect(agreement.mdc95).toBeCloseTo(6.9373, 4)
  })

  it.each(BY_R.icc.map((item, index) => [index, item] as const))('agrees with psych on table %i, intervals too', (_, item) => {
    const { icc } = raterAgreement(item.ratings)
    for (const form of FORMS) {
      const [value, low, high] = item.icc[form]
      expect(icc[form].value, form).toBeCloseTo(value, 8)
      expect(icc[form].interval.low, form).toBeCloseTo(low, 5)
      expect(icc[form].interval.high, form).toBeCloseTo(high, 5)
    }
  })

  it.each([
    ['one subject', [[1, 2]], 'not-enough-data'], ['a missing rating', [[1, 2], [1]], 'shape-mismatch'],
    ['no number', [[1, 2], [1, Number.NaN]], 'not-finite'], ['raters who agree to the last digit', [[1, 1], [2, 2]], 'out-of-range'],
    ['subjects who do not differ', [[1, 2], [2, 1]], 'out-of-range'],
  ])('refuses %s', (_, ratings, code) => {
    expect(() => raterAgreement(ratings)).toThrow(expect.objectContaining({ code }))
  })
})

describe('SEM and MDC95', () => {
  it('of SD 5 and ICC .90 are 1.5811 and 4.3827', () => {
    expect(semFromReliability(5, 0.9)).toBeCloseTo(1.5811, 4)
    expect(mdc95FromSem(semFromReliability(5, 0.9))).toBeCloseTo(4.3827, 3)
  })
})

describe('blandAltman', () => {
  // Source: Bland & Altman 1986, Lancet 1:307–310, Table 1: first readings of the large and the mini peak flow meter, l/min.
  const large = [494, 395, 516, 434, 476, 557, 413, 442, 650, 433, 417, 656, 267, 478, 178, 423, 427]
  const mini = [512, 430, 520, 428, 500, 600, 364, 380, 658, 445, 432, 626, 260, 477, 259, 350, 451]

  it('gives bias, SD, limits and the interval of the bias of the published table', () => {
    const result = blandAltman(large, mini)
    expect(result.bias).toBeCloseTo(-2.1176, 4)
    expect(result.sd).toBeCloseTo(38.7651, 4)
    expect(result.limits.low).toBeCloseTo(-78.097, 3)
    expect(result.limits.high).toBeCloseTo(73.862, 3)
    expect(result.biasInterval.low).toBeCloseTo(-22.05, 2)
    expect(result.biasInterval.high).toBeCloseTo(17.81, 2)
  })

  // The same paper states the standard error of the limits as about √(3 s² / n): 16.3 l/min, hence −114.3 to −45.1 with its −79.7.
  it('gives intervals of the limits close to the rule of the paper', () => {
    const result = blandAltman(large, mini)
    const halfWidth = (result.lowLimitInterval.high - result.lowLimitInterval.low) / 2
    expect(halfWidth / (2.12 * Math.sqrt(3 * 38.7651 ** 2 / 17))).toBeCloseTo(1, 1)
  })

  it('refuses series of unequal length and single pairs', () => {
    expect(() => blandAltman([1, 2], [1])).toThrow(expect.objectContaining({ code: 'shape-mismatch' }))
    expect(() => blandAltman([1], [1])).toThrow(expect.objectContaining({ code: 'not-enough-data' }))
  })
})

describe('kappa', () => {
  it('of [20 5; 10 15] is .400', () => {
    expect(kappa([[20, 5], [10, 15]]).value).toBeCloseTo(0.4, 10)
  })

  // Source: Agresti's SexualFun as in R's vcd.
  it.each([['none', 0.1293], ['linear', 0.2374], ['quadratic', 0.332]] as const)('with weights %s of the SexualFun table is %f', (weights, expected) => {
    expect(kappa(BY_R.kappa.counts, weights).value).toBeCloseTo(expected, 4)
  })

  it.each(['none', 'linear', 'quadratic'] as const)('with weights %s agrees with vcd, standard error too', (weights) => {
    const result = kappa(BY_R.kappa.counts, weights)
    expect(result.value).toBeCloseTo(BY_R.kappa[weights][0], 8)
    expect(result.se).toBeCloseTo(BY_R.kappa[weights][1], 8)
    expect(result.interval.high - result.value).toBeCloseTo(1.959964 * result.se, 5)
  })

  it.each([
    ['one category', [[4]], 'not-enough-data'], ['an empty table', [[0, 0], [0, 0]], 'not-enough-data'],
    ['a ragged table', [[1, 2], [1]], 'shape-mismatch'], ['ratings all in one category', [[9, 0], [0, 0]], 'out-of-range'],
  ])('refuses %s', (_, counts, code) => {
    expect(() => kappa(counts)).toThrow(expect.objectContaining({ code }))
  })
})

describe('theilSen', () => {
  interface TrendCase {
    readonly x: readonly number[]
    readonly y: readonly number[]
    readonly slope: number
    readonly intercept: number
    readonly low: number
    readonly high: number
  }

  // Source: scipy's theilslopes, tests/reference/series_and_trend.py.
  const { trends } = referenceFile<{ readonly trends: readonly TrendCase[] }>('series-and-trend.json')

  it.each(trends.map(item => [item.x.length, item] as const))('agrees with scipy on %i points', (_, item) => {
    const trend = theilSen(item.x.map((x, index) => ({ x, y: item.y[index] ?? Number.NaN })))
    expect(trend?.slope).toBeCloseTo(item.slope, 9)
    expect(trend?.intercept).toBeCloseTo(item.intercept, 9)
    expect(trend?.interval.low).toBeCloseTo(item.low, 9)
    expect(trend?.interval.high).toBeCloseTo(item.high, 9)
  })

  it('says nothing of fewer than four points or of one day alone', () => {
    expect(theilSen([{ x: 0, y: 1 }, { x: 1, y: 2 }, { x: 2, y: 3 }])).toBeNull()
    expect(theilSen([1, 2, 3, 4].map(y => ({ x: 7, y })))).toBeNull()
  })
})
