import { describe, expect, it } from 'vitest'
import { measureMarking } from '#shared/geometry/measure-marking'
import { MEASURES } from '#shared/geometry/registry'
import { frontal, FRONTAL_PAIRS, plumbLine, reading, sagittal, SAGITTAL_PAIRS } from './marking-bodies'

const DEG = 180 / Math.PI

/** Every landmark with the same sd, so that the closed forms for equal σ apply; a plumb line so long that its error is left out by the caller. */
function withSd(pairs: Readonly<Record<string, readonly [number, number]>>, sd: number) {
  return Object.fromEntries(Object.entries(pairs).map(([name, [x, y]]) => [name, { x, y, sd }]))
}

function sdOf(pairs: Readonly<Record<string, readonly [number, number]>>, measure: string, sd = 3): number {
  return reading(measureMarking(sagittal({}, { landmarks: withSd(pairs, sd) })), measure).sd
}

describe('closed forms of the error band', () => {
  // Source: worked values for σ = 3 px, knee of 240 and 220 px, from var = σ²[2/L₁² + 2/L₂² − 2cosφ/(L₁L₂)].
  it.each([[0, 1.8346], [20, 1.8162], [90, 1.4989]])('a knee of 240 and 220 px bent by %i° has an sd of %f°', (bend, expected) => {
    const angle = bend / DEG
    const pairs = {
      greaterTrochanter: [500, 300], lateralEpicondyle: [500, 540],
      lateralMalleolus: [500 - 220 * Math.sin(angle), 540 + 220 * Math.cos(angle)],
    } as const
    expect(sdOf(pairs, 'kneeFlexion')).toBeCloseTo(expected, 4)
  })

  it('a segment of 260 px has 0.9349° of click error, with the plumb line in quadrature', () => {
    const landmarks = withSd({ greaterTrochanter: [500, 520], acromion: [500, 260] }, 3)
    const sd = reading(measureMarking(sagittal({}, { landmarks, plumbLine: plumbLine(0) })), 'trunkInclination').sd
    const plumbSd = Math.SQRT2 * 3 / 700 * DEG
    expect(Math.sqrt(sd ** 2 - plumbSd ** 2)).toBeCloseTo(0.9349, 4)
  })

  it('adds 2° of roll where there is no plumb line', () => {
    const sd = sdOf({ greaterTrochanter: [500, 520], acromion: [500, 260] }, 'trunkInclination')
    expect(Math.sqrt(sd ** 2 - 4)).toBeCloseTo(0.9349, 4)
  })

  it('adds height times roll to an offset', () => {
    const scale = { from: { x: 0, y: 0 }, to: { x: 1000, y: 0 }, lengthMm: 1000 }
    const landmarks = withSd({ acromion: [500, 260], lateralMalleolus: [500, 980] }, 0)
    const sd = reading(measureMarking(sagittal({}, { landmarks, scale })), 'plumbOffset.acromion').sd
    expect(sd).toBeCloseTo(720 * 2 / DEG, 6)
  })

  it('adds the relative error of the scale, √2 · σ / n px', () => {
    const scale = { from: { x: 0, y: 0 }, to: { x: 500, y: 0 }, lengthMm: 1000 }
    const landmarks = withSd({ axilla: [500, 200], supportTop: [500, 300] }, 0)
    const one = reading(measureMarking(sagittal({}, { landmarks, scale, plumbLine: plumbLine(0) })), 'axillaClearance')
    expect(one.value).toBeCloseTo(200, 10)
    expect(one.sd).toBeCloseTo(200 * Math.SQRT2 * 3 / 500, 10)
  })
})

describe('landmark spread', () => {
  const trunk = { greaterTrochanter: [500, 520], acromion: [500, 260] } as const
  const clickPart = (parts: object, height = 1080) => {
    const sd = reading(measureMarking(sagittal(trunk, { ...parts, height })), 'trunkInclination').sd
    return Math.sqrt(sd ** 2 - 4) / DEG * 260
  }

  it('takes 1.3 of the click error for the acromion and 1.5 for the trochanter', () => {
    expect(clickPart({})).toBeCloseTo(3 * Math.hypot(1.3, 1.5), 6)
  })

  it('takes 2.5 for the trochanter under clothes', () => {
    expect(clickPart({ clothed: true })).toBeCloseTo(3 * Math.hypot(1.3, 2.5), 6)
  })

  it('grows with the picture height', () => {
    expect(clickPart({}, 2160)).toBeCloseTo(6 * Math.hypot(1.3, 1.5), 6)
  })

  it('takes an sd given with a landmark as final', () => {
    const landmarks = { greaterTrochanter: { x: 500, y: 520, sd: 4 }, acromion: { x: 500, y: 260, sd: 3 } }
    expect(clickPart({ landmarks, clothed: true })).toBeCloseTo(5, 6)
  })

  it.each([[9, 3 * Math.hypot(1.3, 1.5)], [10, Math.hypot(3 * 1.3, 2)]])('after %i repeated markings uses %f px', (markings, expected) => {
    const options = { repeatability: { greaterTrochanter: { sdPx: 2, markings } } }
    const sd = reading(measureMarking(sagittal(trunk), options), 'trunkInclination').sd
    expect(Math.sqrt(sd ** 2 - 4) / DEG * 260).toBeCloseTo(expected, 6)
  })
})

describe('camera roll in the band', () => {
  const bodies = [sagittal(SAGITTAL_PAIRS), frontal(FRONTAL_PAIRS)]
  const readings = bodies.flatMap(body => measureMarking(body).readings)
  const steady = bodies.flatMap(body => measureMarking({ ...body, plumbLine: plumbLine(0) }).readings)

  it.each(MEASURES.filter(measure => measure.reference === 'body').map(measure => measure.id))('does not widen %s', (id) => {
    const sd = (list: typeof readings) => list.find(one => one.measure === id)?.sd ?? Number.NaN
    expect(sd(readings)).toBeCloseTo(sd(steady), 9)
  })

  it('widens every reading to the vertical that is taken without a plumb line, and says so', () => {
    const vertical = readings.filter(one => MEASURES.some(measure => measure.id === one.measure && measure.reference === 'vertical'))
    expect(vertical.length).toBeGreaterThan(10)
    for (const one of vertical) {
      expect(one.warnings, one.measure).toContain('no-plumb-line')
      expect(one.sd, one.measure).toBeGreaterThan(steady.find(other => other.measure === one.measure)?.sd ?? Number.NaN)
    }
  })
})

describe('95 % limits', () => {
  it('lie 1.96 sd to either side of the value', () => {
    for (const one of measureMarking(sagittal(SAGITTAL_PAIRS)).readings) {
      expect(one.low).toBeCloseTo(one.value - 1.96 * one.sd, 10)
      expect(one.high).toBeCloseTo(one.value + 1.96 * one.sd, 10)
    }
  })
})
