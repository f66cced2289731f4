import { describe, expect, it } from 'vitest'
import { loadAsymmetryOf, supportPercentOf, toBout } from '#server/services/bout-shape'

describe('supportPercentOf', () => {
  // weight off the feet / body mass · 100: MEASUREMENTS definition, worked by hand.
  it.each([[16, 80, 20], [0, 80, 0], [80, 80, 100], [14.5, 72.4, 20], [1, 3, 33.3], [2, 3, 66.7]])('of %d kg off %d kg is %d %', (off, mass, percent) => {
    expect(supportPercentOf(off, mass)).toBe(percent)
  })

  it('is unknown where either is', () => {
    expect([supportPercentOf(null, 80), supportPercentOf(10, null), supportPercentOf(null, null)]).toEqual([null, null, null])
  })

  it('is unknown for a mass of nothing, and never a division by it', () => {
    expect(supportPercentOf(0, 0)).toBeNull()
  })
})

describe('loadAsymmetryOf', () => {
  // (stronger − weaker) / (stronger + weaker) · 100, from typed-in scale values, worked by hand.
  it.each([[45, 15, 50], [40, 40, 0], [60, 0, 100], [15, 45, -50], [0, 60, -100], [50, 25, 33.3]])('of %d kg and %d kg is %d %', (stronger, weaker, percent) => {
    expect(loadAsymmetryOf(stronger, weaker)).toBe(percent)
  })

  it('is unknown where a scale was not read or both show nothing', () => {
    expect([loadAsymmetryOf(null, 10), loadAsymmetryOf(10, null), loadAsymmetryOf(0, 0)]).toEqual([null, null, null])
  })
})

describe('toBout', () => {
  const at = (minute: number) => new Date(Date.UTC(2026, 10, 2, 9, minute))
  const row = {
    id: 'b', clinicId: 'c', patientId: 'p', sessionId: 's', startedAt: at(0), endedAt: at(2), weightOffKg: 16, assistance: 'partial' as const, helpers: 1, armSupport: false, exertion: 5,
    vitals: [], buckles: 0, pain: null, symptoms: [], loadStrongerKg: 45, loadWeakerKg: 15, aids: [], cues: null, endedBecause: null, endedNote: null, version: 3, createdAt: at(0), updatedAt: at(0),
  }

  it('works out duration, support and load asymmetry', () => {
    expect(toBout(row, 80)).toMatchObject({ startedAt: '2026-11-02T09:00:00.000Z', endedAt: '2026-11-02T09:02:00.000Z', durationMs: 120_000, supportPercent: 20, loadAsymmetryPercent: 50, version: 3 })
  })

  it('has no duration while it runs', () => {
    expect(toBout({ ...row, endedAt: null }, 80)).toMatchObject({ endedAt: null, durationMs: null })
  })
})
