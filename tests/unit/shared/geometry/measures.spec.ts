import { describe, expect, it } from 'vitest'
import type { MarkingBody } from '#shared/geometry/marking'
import { measureMarking } from '#shared/geometry/measure-marking'
import { TURNED_BY_THREE, WORKED_SAGITTAL, WORKED_SAGITTAL_READINGS } from '../../../reference/worked-values'
import { WINTER_FRAMES } from '../../../reference/winter-frames'
import { frontal, mirroredSagittal, plumbLine, reading, sagittal, turnedClockwise, valueOf } from './marking-bodies'
import { referenceFile } from './reference-file'

interface IndependentCase {
  readonly body: MarkingBody
  /** Value and sd by measure, with `.left` or `.right` behind a sided one. */
  readonly readings: Readonly<Record<string, readonly [number, number]>>
}

// Source: an independent writing of the definitions in Python, tests/reference/independent_bodies.py.
const INDEPENDENT = referenceFile<readonly IndependentCase[]>('independent-bodies.json')

describe('worked examples', () => {
  it.each(Object.entries(WORKED_SAGITTAL_READINGS))('%s reads %f', (measure, value) => {
    expect(valueOf(WORKED_SAGITTAL, measure)).toBeCloseTo(value, 4)
  })

  it.each(Object.entries(WORKED_SAGITTAL_READINGS))('%s reads the same in a mirrored picture with the facing flipped', (measure, value) => {
    expect(valueOf(mirroredSagittal(WORKED_SAGITTAL), measure)).toBeCloseTo(value, 4)
  })

  it.each(Object.entries(TURNED_BY_THREE))('%s reads %f when the content is turned by 3° and no plumb line tells', (measure, value) => {
    expect(valueOf(turnedClockwise(WORKED_SAGITTAL, 3), measure)).toBeCloseTo(value, 4)
  })

  it('reads a knee bent backwards as negative', () => {
    const body = sagittal({ greaterTrochanter: [500, 500], lateralEpicondyle: [480, 750], lateralMalleolus: [500, 1000] })
    expect(valueOf(body, 'kneeFlexion')).toBeCloseTo(-9.1478, 4)
  })

  it('reads a higher left shoulder as positive', () => {
    expect(valueOf(frontal({ acromionRight: [400, 300], acromionLeft: [600, 290] }), 'shoulderTilt')).toBeCloseTo(2.8624, 4)
  })

  it('reads a lean toward the person\'s left as positive', () => {
    const body = frontal({ asisLeft: [570, 600], asisRight: [430, 600], acromionLeft: [620, 300], acromionRight: [420, 300] })
    expect(valueOf(body, 'trunkLean')).toBeCloseTo(3.8141, 4)
  })

  it('reads a knee inside the hip–ankle line as valgus, positive', () => {
    const body = frontal({ asisLeft: [560, 500], kneeCentreLeft: [550, 750], ankleCentreLeft: [570, 1000] })
    expect(reading(measureMarking(body), 'frontalKneeAngle', 'left').value).toBeCloseTo(6.8645, 4)
  })

  it('reads the midline in half base widths', () => {
    const body = frontal({ ankleCentreRight: [440, 1000], ankleCentreLeft: [640, 1000], sternalNotch: [560, 300] })
    expect(valueOf(body, 'midlineShift')).toBeCloseTo(0.2, 10)
  })

  it('takes the mid-acromion for the midline when the notch is not marked', () => {
    const body = frontal({ ankleCentreRight: [440, 1000], ankleCentreLeft: [640, 1000], acromionLeft: [660, 300], acromionRight: [460, 310] })
    expect(valueOf(body, 'midlineShift')).toBeCloseTo(0.2, 10)
  })

  it('takes the roll from a leaning plumb line out of the trunk angle', () => {
    const result = measureMarking(sagittal(
      { greaterTrochanter: [510, 520], acromion: [560, 260] },
      { plumbLine: { top: { x: 102, y: 200 }, bottom: { x: 60, y: 1000 } } },
    ))
    expect(result.roll.angle).toBeCloseTo(3.0053, 4)
    expect(reading(result, 'trunkInclination').value).toBeCloseTo(7.8803, 4)
    expect(valueOf(sagittal({ greaterTrochanter: [510, 520], acromion: [560, 260] }), 'trunkInclination')).toBeCloseTo(10.8855, 4)
  })
})

// Source: Winter, Biomechanics and Motor Control of Human Movement, Table A.1; y up in cm, so 10 px a cm from y = 1080 down.
describe.each(WINTER_FRAMES)('walking frame $frame of Winter', (frame) => {
  const place = ([x, y]: readonly [number, number]): readonly [number, number] => [(x - 60) * 10, 1080 - y * 10]
  const body = (shankFrom: readonly [number, number]) => sagittal({
    acromion: place(frame.rib), greaterTrochanter: place(frame.hip), lateralEpicondyle: place(shankFrom), lateralMalleolus: place(frame.ankle),
  })

  it('gives the published posture', () => {
    expect(valueOf(body(frame.knee), 'trunkInclination')).toBeCloseTo(frame.trunk, 2)
    expect(valueOf(body(frame.knee), 'hipFlexion')).toBeCloseTo(frame.hipAngle, 2)
    expect(valueOf(body(frame.knee), 'kneeFlexion')).toBeCloseTo(frame.kneeAngle, 2)
  })

  it('gives the knee angle from the fibular head when the shank starts there', () => {
    const thigh = valueOf(body(frame.knee), 'thighInclination')
    const shank = valueOf(body(frame.fibularHead), 'shankInclination')
    expect(thigh + shank).toBeCloseTo(frame.kneeAngleFromFibula, 2)
  })
})

describe('every measure against an independent writing of the definitions', () => {
  it.each(INDEPENDENT.map((item, index) => [index, item] as const))('agrees on body %i: values to 0.001, sds to 0.1 %', (_, item) => {
    const { readings } = measureMarking(item.body)
    const keys = readings.map(one => (item.body.view !== 'sagittal' && one.side ? `${one.measure}.${one.side}` : one.measure))
    expect([...keys].sort()).toEqual(Object.keys(item.readings).sort())
    readings.forEach((one, index) => {
      const [value, sd] = item.readings[keys[index] ?? ''] ?? [Number.NaN, Number.NaN]
      expect(Math.abs(one.value - value), keys[index]).toBeLessThan(0.001)
      expect(Math.abs(one.sd / sd - 1), `sd of ${keys[index]}`).toBeLessThan(0.001)
    })
  })
})

describe('offsets and clearances', () => {
  const legPx = 240.075 + 220.581
  const pairs = { acromion: [560, 260], greaterTrochanter: [510, 520], lateralEpicondyle: [516, 760], lateralMalleolus: [500, 980] } as const
  const scale = { from: { x: 100, y: 100 }, to: { x: 100, y: 600 }, lengthMm: 1000 }

  it('gives offsets in percent of leg length without a scale', () => {
    const result = reading(measureMarking(sagittal(pairs)), 'plumbOffset.acromion')
    expect(result.unit).toBe('%')
    expect(result.value).toBeCloseTo(100 * 60 / legPx, 3)
  })

  it('gives offsets in millimetres with a scale', () => {
    const result = reading(measureMarking(sagittal(pairs, { scale })), 'plumbOffset.acromion')
    expect(result.unit).toBe('mm')
    expect(result.value).toBeCloseTo(120, 10)
  })

  it('never gives pixels: without scale and leg there is no offset', () => {
    const result = measureMarking(sagittal({ acromion: [560, 260], lateralMalleolus: [500, 980] }))
    expect(result.readings).toEqual([])
    expect(result.withheld.find(item => item.measure === 'plumbOffset.acromion')?.missing).toEqual(['greaterTrochanter', 'lateralEpicondyle'])
  })

  it('reads free space under the armpit as positive', () => {
    const body = sagittal({ axilla: [500, 310], supportTop: [520, 340] }, { scale })
    expect(valueOf(body, 'axillaClearance')).toBeCloseTo(60, 10)
  })

  it('reads free space over the seated thigh as positive', () => {
    const body = sagittal({ thighTop: [500, 560], bodySupportBottom: [520, 540] }, { scale })
    expect(valueOf(body, 'thighClearance')).toBeCloseTo(40, 10)
  })

  it('reads an arm support above the lower rib as positive', () => {
    const body = sagittal({ lowerRib: [500, 430], armSupportTop: [520, 420] }, { scale })
    expect(valueOf(body, 'armSupportToRib')).toBeCloseTo(20, 10)
  })

  it('withholds a clearance that has no scale and says so', () => {
    const result = measureMarking(sagittal({ axilla: [500, 310], supportTop: [520, 340] }))
    expect(result.withheld.find(item => item.measure === 'axillaClearance')?.reason).toBe('needs-scale')
  })

  it('needs no facing for a clearance', () => {
    const body = sagittal({ axilla: [500, 310], supportTop: [520, 340] }, { scale, facing: undefined })
    expect(valueOf(body, 'axillaClearance')).toBeCloseTo(60, 10)
  })

  it('lets equipment touch the body', () => {
    const body = sagittal({ axilla: [500, 310], supportTop: [500, 310] }, { scale })
    expect(valueOf(body, 'axillaClearance')).toBe(0)
  })
})

describe('centre of mass', () => {
  // Source: worked example after Winter, Table 4.1: m, y up, both legs alike → x 0.02769406 with the ankle at 0.
  const place = (x: number, y: number): readonly [number, number] => [500 + 500 * x, 1000 - 500 * y]
  const pairs = {
    greaterTrochanter: place(0.04, 0.92), acromion: place(0.02, 1.42), lateralEpicondyle: place(0.02, 0.5), lateralMalleolus: place(0, 0.08),
    fifthMetatarsal: place(0.12, 0.03),
  }
  const scale = { from: { x: 100, y: 100 }, to: { x: 100, y: 600 }, lengthMm: 1000 }

  it('lies in front of the ankle by the worked example', () => {
    const result = reading(measureMarking(sagittal(pairs, { scale })), 'centreOfMassOffset')
    expect(result.value).toBeCloseTo(27.69406, 5)
    expect(result.warnings).toContain('assumes-both-legs-alike')
  })

  it('is withheld with the reason when support is in use', () => {
    const result = measureMarking(sagittal(pairs, { scale, supported: true }))
    expect(result.readings.map(item => item.measure)).not.toContain('centreOfMassOffset')
    expect(result.withheld.find(item => item.measure === 'centreOfMassOffset')?.reason).toBe('supported')
  })
})

describe('healthy stance at the default set-up', () => {
  it('reads within on trunk, hip and knee', async () => {
    const { STANCE_HEIGHTS_CM: height, WOODHULL_OFFSETS_CM: offset } = await import('../../../reference/woodhull-stance')
    // Whole body in the middle two thirds: 170 cm over 720 px of a picture 1080 high.
    const place = (forward: number, up: number): readonly [number, number] => [540 + forward * 720 / 170, 950 - up * 720 / 170]
    const result = measureMarking(sagittal({
      acromion: place(offset.shoulder, height.shoulder), greaterTrochanter: place(offset.hip, height.hip),
      lateralEpicondyle: place(offset.knee, height.knee), lateralMalleolus: place(0, height.malleolus),
    }, { plumbLine: plumbLine(0) }))
    expect(reading(result, 'trunkInclination').value).toBeCloseTo(-2.7, 0)
    expect(reading(result, 'hipFlexion').value).toBeCloseTo(-6, 0)
    expect(reading(result, 'kneeFlexion').value).toBeCloseTo(1.8, 0)
    for (const measure of ['trunkInclination', 'hipFlexion', 'kneeFlexion']) {
      expect(reading(result, measure).targetStatus, measure).toBe('within')
    }
  })
})
