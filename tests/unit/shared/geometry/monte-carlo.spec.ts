import { describe, expect, it } from 'vitest'
import { findLandmark } from '#shared/geometry/landmarks'
import type { MarkingBody, PlumbLine } from '#shared/geometry/marking'
import { measureMarking } from '#shared/geometry/measure-marking'
import { FRONTAL_PAIRS, frontal, plumbLine, SAGITTAL_PAIRS, sagittal } from './marking-bodies'
import { plainFrontal, plainSagittal, type Point, type PlainBody } from './plain-formulas'
import { seededNormal } from './seeded-random'

const DRAWS = 50_000
const CLICK_SD = 3
const ASSUMED_ROLL_SD_RAD = 2 * Math.PI / 180

interface Spread {
  readonly sd: number
  readonly covered: number
}

function spreadOf(name: string): number {
  return CLICK_SD * (findLandmark(name)?.spread ?? Number.NaN)
}

function rollOf({ top, bottom }: PlumbLine, click: () => number): number {
  return Math.atan2(top.x + click() - bottom.x - click(), bottom.y + click() - top.y - click())
}

/** One clicking of the whole body: every landmark, both ends of the plumb line and of the scale, each with its own error. */
function clickBody(body: MarkingBody, sign: number, normal: () => number): PlainBody {
  const click = () => CLICK_SD * normal()
  const points: Record<string, Point> = {}
  for (const [name, mark] of Object.entries(body.landmarks)) {
    const sd = spreadOf(name)
    points[name] = [mark.x + sd * normal() - body.width / 2, mark.y + sd * normal() - body.height / 2]
  }
  const { scale } = body
  const mmPerPx = scale
    ? scale.lengthMm / Math.hypot(scale.to.x + click() - scale.from.x - click(), scale.to.y + click() - scale.from.y - click())
    : null
  const rollRad = body.plumbLine ? rollOf(body.plumbLine, click) : ASSUMED_ROLL_SD_RAD * normal()
  return { points, sign, rollRad, mmPerPx }
}

/** Empirical sd of each measure over many clickings, and how often the stated 95 % band about the truth held the click's value. */
function simulate(body: MarkingBody, seed: number, formulas: (plain: PlainBody) => Record<string, number>): Map<string, Spread> {
  const normal = seededNormal(seed)
  const { readings } = measureMarking(body)
  const keyOf = (measure: string, side: string | undefined) => (body.view !== 'sagittal' && side ? `${measure}.${side}` : measure)
  const truth = readings.map(one => ({ key: keyOf(one.measure, one.side), value: one.value, low: one.low, high: one.high }))
  const sum = truth.map(() => 0)
  const squares = truth.map(() => 0)
  const inside = truth.map(() => 0)
  for (let draw = 0; draw < DRAWS; draw++) {
    const values = formulas(clickBody(body, body.view === 'frontal-posterior' ? -1 : 1, normal))
    truth.forEach(({ key, value, low, high }, index) => {
      const drawn = values[key] ?? Number.NaN
      sum[index] = (sum[index] ?? 0) + drawn - value
      squares[index] = (squares[index] ?? 0) + (drawn - value) ** 2
      if (drawn >= low && drawn <= high) inside[index] = (inside[index] ?? 0) + 1
    })
  }
  return new Map(truth.map(({ key }, index) => {
    const mean = (sum[index] ?? 0) / DRAWS
    return [key, { sd: Math.sqrt((squares[index] ?? 0) / DRAWS - mean * mean), covered: (inside[index] ?? 0) / DRAWS }]
  }))
}

const SCALE = { from: { x: 200, y: 150 }, to: { x: 210, y: 750 }, lengthMm: 1000 }
const posteriorPairs = Object.fromEntries(Object.entries(FRONTAL_PAIRS)
  .filter(([name]) => name !== 'sternalNotch')
  .map(([name, [x, y]]) => [name.replace('asis', 'psis'), [1080 - x, y] as const]))

const CASES: readonly (readonly [string, MarkingBody, (plain: PlainBody) => Record<string, number>])[] = [
  ['the side view with plumb line and scale', sagittal(SAGITTAL_PAIRS, { plumbLine: plumbLine(3), scale: SCALE }), plainSagittal],
  ['the side view without plumb line and scale', sagittal(SAGITTAL_PAIRS), plainSagittal],
  ['the front view', frontal(FRONTAL_PAIRS, { plumbLine: plumbLine(-2) }), plain => plainFrontal(plain, 'asis')],
  ['the back view without plumb line', frontal(posteriorPairs, { view: 'frontal-posterior' }), plain => plainFrontal(plain, 'psis')],
]

describe.each(CASES)('error bands of %s over 50,000 clickings', (_, body, formulas) => {
  const spreads = simulate(body, 7, formulas)

  it('state the sd of every measure within 2 %', () => {
    for (const one of measureMarking(body).readings) {
      const key = body.view !== 'sagittal' && one.side ? `${one.measure}.${one.side}` : one.measure
      expect(one.sd / (spreads.get(key)?.sd ?? Number.NaN), key).toBeGreaterThan(0.98)
      expect(one.sd / (spreads.get(key)?.sd ?? Number.NaN), key).toBeLessThan(1.02)
    }
  })

  it('cover 94 to 96 % of the clickings', () => {
    expect(spreads.size).toBeGreaterThan(6)
    for (const [key, { covered }] of spreads) {
      expect(covered, key).toBeGreaterThan(0.94)
      expect(covered, key).toBeLessThan(0.96)
    }
  })
})
