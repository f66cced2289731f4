import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { GeometryError } from '#shared/geometry/geometry-error'
import { LANDMARKS, type View } from '#shared/geometry/landmarks'
import type { MarkedPoint, MarkingBody } from '#shared/geometry/marking'
import { measureMarking } from '#shared/geometry/measure-marking'
import type { Reading } from '#shared/geometry/reading'
import {
  frontal, FRONTAL_PAIRS, mapPoints, mirroredSagittal, plumbLine, sagittal, SAGITTAL_PAIRS, sidesExchanged, turnedClockwise,
} from './marking-bodies'

type Pairs = Readonly<Record<string, readonly [number, number]>>

/** The standing person with every landmark moved by up to 25 px. */
function shaken(pairs: Pairs): fc.Arbitrary<Pairs> {
  const shift = fc.double({ min: -25, max: 25, noNaN: true })
  const names = Object.keys(pairs)
  return fc.array(fc.tuple(shift, shift), { minLength: names.length, maxLength: names.length }).map(shifts =>
    Object.fromEntries(names.map((name, index) => {
      const [x, y] = pairs[name] ?? [0, 0]
      const [dx, dy] = shifts[index] ?? [0, 0]
      return [name, [x + dx, y + dy] as const]
    })))
}

const SCALE = { from: { x: 200, y: 250 }, to: { x: 210, y: 750 }, lengthMm: 1000 }
const LARGE = { width: 1400, height: 1400 }
const aSide = shaken(SAGITTAL_PAIRS).map(pairs => sagittal(pairs, { ...LARGE, plumbLine: plumbLine(1), scale: SCALE }))
const aFront = shaken(FRONTAL_PAIRS).map(pairs => frontal(pairs, { ...LARGE, plumbLine: plumbLine(1), scale: SCALE }))
const anyBody: fc.Arbitrary<MarkingBody> = fc.oneof(aSide, aFront)

function keyed(readings: readonly Reading[]): Map<string, Reading> {
  return new Map(readings.map(one => [`${one.measure} ${one.side ?? ''}`, one]))
}

function expectSame(before: MarkingBody, after: MarkingBody, only: (one: Reading) => boolean = () => true): void {
  const others = keyed(measureMarking(after).readings)
  for (const [key, one] of keyed(measureMarking(before).readings)) {
    if (!only(one)) continue
    expect(others.get(key)?.value, key).toBeCloseTo(one.value, 6)
    expect(others.get(key)?.sd, `sd of ${key}`).toBeCloseTo(one.sd, 6)
  }
}

describe('measureMarking, for any body', () => {
  it('reads the same in a mirrored picture with the facing flipped', () => {
    fc.assert(fc.property(aSide, body => expectSame(body, mirroredSagittal(body))))
  })

  it('reads the same in a mirrored frontal picture that is said to be mirrored', () => {
    fc.assert(fc.property(aFront, body => expectSame(body, {
      ...mapPoints(body, ({ x, y }) => ({ x: body.width - x, y })),
      mirrored: true,
    })))
  })

  it('reads the same when picture and plumb line turn together', () => {
    fc.assert(fc.property(anyBody, fc.double({ min: -6, max: 6, noNaN: true }), (body, angle) => {
      expectSame(body, turnedClockwise(body, angle))
    }))
  })

  it('reads the same wherever the person stands in the picture', () => {
    const shift = fc.double({ min: 0, max: 300, noNaN: true })
    fc.assert(fc.property(anyBody, shift, shift, (body, dx, dy) => expectSame(body, mapPoints(body, ({ x, y }) => ({ x: x + dx, y: y + dy })))))
  })

  it('reads the same angles, ratios and millimetres at any picture size', () => {
    fc.assert(fc.property(anyBody, fc.double({ min: 0.3, max: 3, noNaN: true }), (body, factor) => {
      const scaled = mapPoints(body, ({ x, y }) => ({ x: x * factor, y: y * factor }))
      expectSame(body, { ...scaled, width: body.width * factor, height: body.height * factor })
    }))
  })

  it('reads joint angles that do not depend on the camera roll', () => {
    const joints = ['hipFlexion', 'kneeFlexion', 'ankleDorsiflexion', 'trunkOnPelvis', 'frontalKneeAngle', 'stanceWidthRatio']
    fc.assert(fc.property(anyBody, fc.double({ min: -14, max: 14, noNaN: true }), (body, roll) => {
      expectSame(body, { ...body, plumbLine: plumbLine(roll) }, one => joints.includes(one.measure))
    }))
  })

  it('negates tilts, lean and midline shift and exchanges the knees when left, right and the view sign are exchanged', () => {
    fc.assert(fc.property(aFront, (body) => {
      const others = keyed(measureMarking({ ...sidesExchanged(body), mirrored: true }).readings)
      for (const one of measureMarking(body).readings) {
        if (one.measure === 'frontalKneeAngle') {
          const otherSide = one.side === 'left' ? 'right' : 'left'
          expect(others.get(`frontalKneeAngle ${otherSide}`)?.value).toBeCloseTo(one.value, 9)
        } else if (one.measure === 'stanceWidthRatio') {
          expect(others.get('stanceWidthRatio ')?.value).toBeCloseTo(one.value, 9)
        } else {
          expect(others.get(`${one.measure} `)?.value, one.measure).toBeCloseTo(-one.value, 9)
        }
      }
    }))
  })

  it('gives fewer readings when landmarks are missing, and those the same', () => {
    fc.assert(fc.property(aSide, fc.subarray(Object.keys(SAGITTAL_PAIRS)), (body, kept) => {
      const whole = keyed(measureMarking(body).readings)
      const part = { ...body, landmarks: Object.fromEntries(Object.entries(body.landmarks).filter(([name]) => kept.includes(name))) }
      for (const [key, one] of keyed(measureMarking(part).readings)) expect(one).toEqual(whole.get(key))
    }))
  })
})

const anyNumber = fc.oneof(
  fc.double({ noNaN: true, noDefaultInfinity: true }),
  fc.double({ min: -100, max: 2000, noNaN: true }),
  fc.constantFrom(0, 1, 500, 540, 1e-9, 1e-300, 1080),
)
const anyPoint: fc.Arbitrary<MarkedPoint> = fc.record({ x: anyNumber, y: anyNumber })
const insidePoint: fc.Arbitrary<MarkedPoint> = fc.record({
  x: fc.oneof(fc.double({ min: 0, max: 1080, noNaN: true }), fc.constantFrom(0, 540, 540.0000001, 1080)),
  y: fc.oneof(fc.double({ min: 0, max: 1080, noNaN: true }), fc.constantFrom(0, 540, 540.0000001, 1080)),
})

function bodyOf(view: View, point: fc.Arbitrary<MarkedPoint>): fc.Arbitrary<MarkingBody> {
  const names = LANDMARKS.filter(landmark => landmark.views.includes(view)).map(landmark => landmark.id)
  return fc.record({
    view: fc.constant(view),
    width: fc.oneof({ weight: 5, arbitrary: fc.constant(1080) }, anyNumber),
    height: fc.oneof({ weight: 5, arbitrary: fc.constant(1080) }, anyNumber),
    facing: fc.constantFrom('left' as const, 'right' as const, undefined),
    side: fc.constantFrom('left' as const, 'right' as const, undefined),
    mirrored: fc.boolean(),
    supported: fc.boolean(),
    landmarks: fc.dictionary(
      fc.constantFrom(...names),
      fc.tuple(point, fc.oneof(fc.constant(undefined), fc.constant(0), anyNumber)).map(([at, sd]) => ({ ...at, ...(sd === undefined ? {} : { sd }) })),
      { maxKeys: names.length },
    ),
    plumbLine: fc.option(fc.record({ top: point, bottom: point }), { nil: undefined }),
    scale: fc.option(fc.record({ from: point, to: point, lengthMm: anyNumber }), { nil: undefined }),
  })
}

describe.each(['sagittal', 'frontal-anterior', 'frontal-posterior'] as const)('any finite input in the %s view', (view) => {
  it.each([['anywhere', anyPoint], ['inside the picture', insidePoint]] as const)('with points %s throws nothing but a GeometryError, and no reading is ever NaN', (_, point) => {
    fc.assert(fc.property(bodyOf(view, point), (body) => {
      let readings: readonly Reading[] = []
      try {
        readings = measureMarking(body).readings
      } catch (error) {
        if (!(error instanceof GeometryError)) throw error
        expect(error.code).toMatch(/^[a-z-]+$/)
      }
      for (const one of readings) {
        expect([one.value, one.sd, one.low, one.high].every(Number.isFinite), JSON.stringify(one)).toBe(true)
        expect(one.sd).toBeGreaterThanOrEqual(0)
        if (one.unit === 'deg') expect(one.value > -180 && one.value <= 180).toBe(true)
      }
    }), { numRuns: 400 })
  })
})
