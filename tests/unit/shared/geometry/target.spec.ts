import { describe, expect, it } from 'vitest'
import { measureMarking } from '#shared/geometry/measure-marking'
import { probabilityWithin, targetStatus } from '#shared/geometry/target'
import { frontal, reading, sagittal } from './marking-bodies'

const ZONE = { low: -8, high: 5 }

describe('probabilityWithin', () => {
  // Source: tables of the standard normal distribution: Φ(1.96) = .9750, Φ(1) = .8413, Φ(0.8416) = .8000.
  it.each([
    [{ low: -1.96, high: 1.96 }, 0, 1, 0.95],
    [{ low: null, high: 1 }, 0, 1, 0.8413],
    [{ low: 0, high: null }, 0.8416, 1, 0.8],
    [{ low: -1, high: 1 }, 0, 0.5, 0.9545],
  ])('of %o for %f ± %f is %f', (zone, value, sd, expected) => {
    expect(probabilityWithin(zone, value, sd)).toBeCloseTo(expected, 4)
  })

  it('of an exact value is one on the limit and none past it', () => {
    expect(probabilityWithin(ZONE, 5, 0)).toBe(1)
    expect(probabilityWithin(ZONE, 5.001, 0)).toBe(0)
  })
})

describe('targetStatus', () => {
  it.each([
    [0, 2, 'within'], [5, 1, 'unclear'], [9, 2, 'outside'], [4, 1.2, 'unclear'], [3.9, 1.2, 'within'], [6.1, 1.2, 'outside'], [5.9, 1.2, 'unclear'],
    [0, 40, 'outside'],
  ] as const)('of %f ± %f is %s', (value, sd, expected) => {
    expect(targetStatus(ZONE, value, sd)).toBe(expected)
  })

  it('follows the clinic\'s own probabilities', () => {
    expect(targetStatus(ZONE, 4, 1.2, { within: 0.75, outside: 0.2 })).toBe('within')
  })
})

describe('target of a reading', () => {
  const lean = (dx: number) => sagittal({ greaterTrochanter: [500, 560], acromion: [500 + dx, 260] }, {
    plumbLine: { top: { x: 900, y: 50 }, bottom: { x: 900, y: 1050 } },
  })

  it('is the default of the measure', () => {
    expect(reading(measureMarking(lean(0)), 'trunkInclination').targetStatus).toBe('within')
    expect(reading(measureMarking(lean(60)), 'trunkInclination').targetStatus).toBe('outside')
  })

  it('is the clinic\'s when it has set one', () => {
    const targets = { trunkInclination: { low: 5, high: 20 } }
    expect(reading(measureMarking(lean(60), { targets }), 'trunkInclination').targetStatus).toBe('within')
  })

  it('is absent when the clinic took it away, and on measures that are not judged', () => {
    expect(reading(measureMarking(lean(0), { targets: { trunkInclination: null } }), 'trunkInclination')).not.toHaveProperty('targetStatus')
    const thigh = sagittal({ greaterTrochanter: [500, 500], lateralEpicondyle: [510, 750] })
    expect(reading(measureMarking(thigh), 'thighInclination')).not.toHaveProperty('targetStatus')
  })

  it('in millimetres does not judge a reading in percent', () => {
    const pairs = { acromion: [560, 260], greaterTrochanter: [510, 520], lateralEpicondyle: [516, 760], lateralMalleolus: [500, 980] } as const
    const scale = { from: { x: 100, y: 100 }, to: { x: 100, y: 600 }, lengthMm: 1000 }
    const targets = { 'plumbOffset.acromion': { low: 0, high: 40, unit: 'mm' } } as const
    expect(reading(measureMarking(sagittal(pairs), { targets }), 'plumbOffset.acromion')).not.toHaveProperty('targetStatus')
    expect(reading(measureMarking(sagittal(pairs, { scale }), { targets }), 'plumbOffset.acromion').targetStatus).toBe('outside')
  })

  it('never judges a shoulder tilt under 5°', () => {
    const targets = { shoulderTilt: { low: -2, high: 2 } }
    const tilted = (degrees: number) => frontal({
      acromionRight: [400, 400], acromionLeft: [700, 400 - 300 * Math.tan(degrees * Math.PI / 180)],
    }, { plumbLine: { top: { x: 900, y: 50 }, bottom: { x: 900, y: 1050 } } })
    expect(reading(measureMarking(tilted(4.9), { targets }), 'shoulderTilt')).not.toHaveProperty('targetStatus')
    expect(reading(measureMarking(tilted(5.1), { targets }), 'shoulderTilt').targetStatus).toBe('outside')
  })
})
