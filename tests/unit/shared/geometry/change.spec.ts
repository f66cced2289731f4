import { describe, expect, it } from 'vitest'
import { type ChangeContext, compareReadings, isLikeSupport } from '#shared/geometry/change'
import type { Reading } from '#shared/geometry/reading'

const UNKNOWN: ChangeContext = { mdc95: null, supportBefore: null, supportAfter: null }

function knee(value: number, parts: Partial<Reading> = {}): Reading {
  return { measure: 'kneeFlexion', definitionVersion: 1, view: 'sagittal', value, unit: 'deg', sd: 1.5, low: value - 2.94, high: value + 2.94, warnings: [], ...parts }
}

describe('compareReadings', () => {
  it('calls a change past the floor of the measure larger than measurement error', () => {
    expect(compareReadings(knee(13), knee(7.9), UNKNOWN)).toMatchObject({ threshold: 5, largerThanError: true, mdc95: null })
  })

  it('calls a change on the floor within measurement error', () => {
    expect(compareReadings(knee(13), knee(8), UNKNOWN)).toMatchObject({ change: -5, largerThanError: false })
  })

  it('takes 1.96 · √(sd₁² + sd₂²) when that is larger than the floor', () => {
    const change = compareReadings(knee(13, { sd: 3 }), knee(7, { sd: 4 }), UNKNOWN)
    expect(change?.threshold).toBeCloseTo(1.96 * 5, 10)
    expect(change?.largerThanError).toBe(false)
  })

  it('takes the clinic\'s MDC95 instead of the floor once it is known, even when that is smaller', () => {
    expect(compareReadings(knee(13, { sd: 0.5 }), knee(9, { sd: 0.5 }), { ...UNKNOWN, mdc95: 3 })).toMatchObject({ threshold: 3, mdc95: 3, largerThanError: true })
    expect(compareReadings(knee(13), knee(6), { ...UNKNOWN, mdc95: 8 })).toMatchObject({ threshold: 8, largerThanError: false })
  })

  it.each([
    ['trunkInclination', 'deg', 5], ['trunkLean', 'deg', 3], ['shoulderTilt', 'deg', 3], ['frontalKneeAngle', 'deg', 8],
    ['plumbOffset.ear', 'mm', 10], ['plumbOffset.ear', '%', 5], ['midlineShift', '1', 0.1], ['stanceWidthRatio', '1', 0.1],
  ] as const)('has the floor of %s in %s at %f', (measure, unit, floor) => {
    const at = (value: number) => knee(value, { measure, unit, sd: 0 })
    expect(compareReadings(at(0), at(1), UNKNOWN)?.threshold).toBe(floor)
  })

  it('goes the short way round', () => {
    expect(compareReadings(knee(179), knee(-179), UNKNOWN)?.change).toBeCloseTo(2, 10)
  })

  it('warns when support differed by more than 10 points', () => {
    expect(compareReadings(knee(13), knee(5), { ...UNKNOWN, supportBefore: 30, supportAfter: 20 })?.warnings).toEqual([])
    expect(compareReadings(knee(13), knee(5), { ...UNKNOWN, supportBefore: 30, supportAfter: 19 })?.warnings).toEqual(['support-differs'])
  })

  it('warns when one reading is from the front and the other from behind', () => {
    const lean = (view: Reading['view']) => knee(3, { measure: 'trunkLean', view })
    expect(compareReadings(lean('frontal-anterior'), lean('frontal-posterior'), UNKNOWN)?.warnings).toEqual(['view-differs'])
  })

  it.each([
    ['measures', { measure: 'hipFlexion' }], ['sides', { side: 'left' }], ['units', { unit: 'mm' }], ['definition versions', { definitionVersion: 2 }],
  ] as const)('does not compare different %s', (_, parts) => {
    expect(compareReadings(knee(13), knee(5, parts), UNKNOWN)).toBeNull()
  })
})

describe('isLikeSupport', () => {
  it.each([[30, 20, true], [30, 19, false], [null, 30, true]] as const)('of %s and %s is %s', (before, after, expected) => {
    expect(isLikeSupport(before, after)).toBe(expected)
  })
})
