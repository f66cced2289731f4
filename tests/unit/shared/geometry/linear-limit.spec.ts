import { describe, expect, it } from 'vitest'
import { measureMarking } from '#shared/geometry/measure-marking'
import { LARGEST_LINEAR_SD } from '#shared/geometry/take-reading'
import { DIVISOR_WEIGHT } from '#shared/geometry/dual'
import { frontal, reading, sagittal } from './marking-bodies'
import { seededNormal } from './seeded-random'

const DRAWS = 100_000

interface Honesty {
  readonly sdRatio: number
  readonly covered: number
}

function honestyOf(draw: () => number, sd: number): Honesty {
  let squares = 0
  let inside = 0
  for (let index = 0; index < DRAWS; index++) {
    const error = draw()
    squares += error * error
    if (Math.abs(error) <= 1.96 * sd) inside += 1
  }
  return { sdRatio: Math.sqrt(squares / DRAWS) / sd, covered: inside / DRAWS }
}

/** A line of length 1 whose two ends err so that its direction has the linear sd. */
function direction(sd: number): Honesty {
  const normal = seededNormal(11)
  return honestyOf(() => Math.atan2(sd * normal(), 1 + sd * normal()), sd)
}

/** A quotient near 1, both of its parts with the relative sd. */
function quotient(sd: number): Honesty {
  const normal = seededNormal(12)
  return honestyOf(() => (1 + sd * normal()) / (1 + sd * normal()) - 1, Math.SQRT2 * sd)
}

describe('where the linear band stops being honest', () => {
  const limit = LARGEST_LINEAR_SD

  it('still holds 94 % of a direction at the limit, with the sd right to 4 %', () => {
    expect(direction(limit).covered).toBeGreaterThan(0.94)
    expect(direction(limit).sdRatio).toBeLessThan(1.04)
  })

  it('holds less than 94 % of a direction half as far again', () => {
    expect(direction(1.5 * limit).covered).toBeLessThan(0.94)
  })

  it('still holds 94 % of a quotient at the limit of its divisor, with the sd right to 4 %', () => {
    expect(quotient(limit / DIVISOR_WEIGHT).covered).toBeGreaterThan(0.94)
    expect(quotient(limit / DIVISOR_WEIGHT).sdRatio).toBeLessThan(1.04)
  })

  it('holds less than 94 % of a quotient half as far again', () => {
    expect(quotient(1.5 * limit / DIVISOR_WEIGHT).covered).toBeLessThan(0.94)
  })
})

describe('segment-too-short', () => {
  // A line between two points of 3 px each has the direction sd √2 · 3 / L rad: 0.2 at L = 21.2 px.
  const head = (length: number) => sagittal({ tragus: [500, 200], canthus: [500 + length, 200] })

  it('warns of a line under its limit', () => {
    expect(reading(measureMarking(head(21)), 'gazeAngle').warnings).toContain('segment-too-short')
  })

  it('says nothing of a line over it', () => {
    expect(reading(measureMarking(head(22)), 'gazeAngle').warnings).not.toContain('segment-too-short')
  })

  it('counts the roll as no shortness: a long line without a plumb line is not too short', () => {
    expect(reading(measureMarking(head(400)), 'gazeAngle').warnings).toEqual(['no-plumb-line'])
  })

  it('warns of a base too narrow to divide by', () => {
    const stance = (width: number) => frontal({ sternalNotch: [500, 300], ankleCentreRight: [500 - width / 2, 1000], ankleCentreLeft: [500 + width / 2, 1000] })
    // Relative sd of the base √2 · 3 / width: 0.1 at 42.4 px.
    expect(reading(measureMarking(stance(42)), 'midlineShift').warnings).toContain('segment-too-short')
    expect(reading(measureMarking(stance(43)), 'midlineShift').warnings).not.toContain('segment-too-short')
  })

  it('warns on millimetres from a scale too short to divide by', () => {
    const scaled = (lengthPx: number) => sagittal(
      { acromion: [500, 260], lateralMalleolus: [500, 980] },
      { scale: { from: { x: 10, y: 10 }, to: { x: 10 + lengthPx, y: 10 }, lengthMm: 100 } },
    )
    expect(reading(measureMarking(scaled(42)), 'plumbOffset.acromion').warnings).toContain('scale-too-short')
    expect(reading(measureMarking(scaled(43)), 'plumbOffset.acromion').warnings).not.toContain('scale-too-short')
  })
})
