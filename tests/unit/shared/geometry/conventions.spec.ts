import { describe, expect, it } from 'vitest'
import { GeometryError } from '#shared/geometry/geometry-error'
import type { MarkingBody } from '#shared/geometry/marking'
import { measureMarking } from '#shared/geometry/measure-marking'
import { nearSide } from '#shared/geometry/pose'
import { frontal, FRONTAL_PAIRS, marks, plumbLine, reading, sagittal, valueOf } from './marking-bodies'

const TRUNK = { greaterTrochanter: [510, 520], acromion: [500, 260] } as const

function errorOf(body: MarkingBody): Pick<GeometryError, 'code' | 'path'> {
  try {
    measureMarking(body)
  } catch (error) {
    if (error instanceof GeometryError) return { code: error.code, path: error.path }
    throw error
  }
  throw new Error('Nothing was thrown')
}

describe('facing', () => {
  it('is taken from the foot when it is not given', () => {
    const pairs = { ...TRUNK, heel: [470, 1010], fifthMetatarsal: [600, 1010] } as const
    expect(valueOf(sagittal(pairs, { facing: undefined }), 'trunkInclination')).toBeCloseTo(-2.2026, 4)
  })

  it('is required when neither given nor marked', () => {
    expect(errorOf(sagittal(TRUNK, { facing: undefined }))).toEqual({ code: 'facing-required', path: ['facing'] })
  })

  it('is not asked for while nothing can be computed', () => {
    expect(measureMarking(sagittal({ acromion: [500, 260] }, { facing: undefined })).readings).toEqual([])
  })

  it('given against the foot wins, with a warning', () => {
    const result = measureMarking(sagittal({ ...TRUNK, heel: [600, 1010], fifthMetatarsal: [470, 1010] }))
    expect(reading(result, 'trunkInclination').value).toBeCloseTo(-2.2026, 4)
    expect(reading(result, 'trunkInclination').warnings).toContain('facing-mismatch')
  })

  it.each([
    ['right', false, 'right'], ['left', false, 'left'], ['right', true, 'left'], ['left', true, 'right'],
  ] as const)('to picture %s, mirrored %s, shows the person\'s %s side', (facing, mirrored, side) => {
    expect(nearSide(facing, mirrored)).toBe(side)
    expect(measureMarking(sagittal(TRUNK, { facing, mirrored, side })).warnings).not.toContain('maybe-mirrored')
    const other = side === 'left' ? 'right' : 'left'
    expect(measureMarking(sagittal(TRUNK, { facing, mirrored, side: other })).warnings).toContain('maybe-mirrored')
  })
})

describe('side', () => {
  it('of a sagittal reading is the stated near side', () => {
    expect(reading(measureMarking(sagittal(TRUNK, { side: 'right' })), 'trunkInclination').side).toBe('right')
    expect(reading(measureMarking(sagittal(TRUNK)), 'trunkInclination')).not.toHaveProperty('side')
  })

  it('is carried by sided frontal measures only', () => {
    const { readings } = measureMarking(frontal(FRONTAL_PAIRS, { side: 'left' }))
    expect(readings.filter(one => one.side).map(one => `${one.measure} ${one.side}`)).toEqual(['frontalKneeAngle left', 'frontalKneeAngle right'])
  })
})

describe('left-right-swapped', () => {
  const exchanged = { acromionLeft: [420, 300], acromionRight: [640, 310], asisLeft: [600, 540], asisRight: [470, 536] } as const

  it('warns on readings that use a pair on the wrong sides, and on no others', () => {
    const result = measureMarking(frontal(exchanged))
    expect(result.warnings).toContain('left-right-swapped')
    expect(reading(result, 'shoulderTilt').warnings).toContain('left-right-swapped')
    expect(reading(result, 'pelvicTilt').warnings).not.toContain('left-right-swapped')
  })

  it('follows the view: from behind the person\'s left is on picture left', () => {
    const shoulders = { acromionLeft: [420, 300], acromionRight: [640, 310] } as const
    expect(measureMarking(frontal(shoulders, { view: 'frontal-posterior' })).warnings).not.toContain('left-right-swapped')
    expect(measureMarking(frontal(shoulders, { mirrored: true })).warnings).not.toContain('left-right-swapped')
  })
})

describe('plumb line', () => {
  it('may be given upside down', () => {
    const line = plumbLine(3)
    const result = measureMarking(sagittal(TRUNK, { plumbLine: { top: line.bottom, bottom: line.top } }))
    expect(result.roll.angle).toBeCloseTo(3, 10)
  })

  it('shorter than a third of the picture is refused', () => {
    const short = (length: number) => sagittal(TRUNK, { plumbLine: { top: { x: 100, y: 100 }, bottom: { x: 100, y: 100 + length } } })
    expect(errorOf(short(359))).toEqual({ code: 'plumb-line-too-short', path: ['plumbLine'] })
    expect(measureMarking(short(360)).roll.source).toBe('plumb-line')
  })

  it.each([[14.9, false], [15.1, true], [-15.1, true]])('leaning by %f° warns of a large roll: %s', (angle, warns) => {
    const result = measureMarking(sagittal(TRUNK, { plumbLine: plumbLine(angle) }))
    expect(reading(result, 'trunkInclination').warnings.includes('large-roll')).toBe(warns)
  })
})

describe('bad bodies', () => {
  const at = (x: number, y: number) => ({ ...marks(TRUNK), acromion: { x, y } })
  const cases: readonly (readonly [string, Partial<MarkingBody>, string, readonly string[]])[] = [
    ['a number that is none', { landmarks: at(Number.NaN, 10) }, 'not-finite', ['landmarks', 'acromion', 'x']],
    ['an endless number', { landmarks: at(10, Infinity) }, 'not-finite', ['landmarks', 'acromion', 'y']],
    ['a point left of the picture', { landmarks: at(-0.1, 10) }, 'landmark-out-of-picture', ['landmarks', 'acromion']],
    ['a point under the picture', { landmarks: at(10, 1080.1) }, 'landmark-out-of-picture', ['landmarks', 'acromion']],
    ['two landmarks on one point', { landmarks: at(510, 520) }, 'landmarks-coincide', ['landmarks', 'acromion']],
    ['a name that is none', { landmarks: { nose: { x: 1, y: 1 } } }, 'unknown-landmark', ['landmarks', 'nose']],
    ['a name of every object', { landmarks: { constructor: { x: 1, y: 1 } } }, 'unknown-landmark', ['landmarks', 'constructor']],
    ['a landmark of another view', { landmarks: { asisLeft: { x: 1, y: 1 } } }, 'landmark-not-in-view', ['landmarks', 'asisLeft']],
    ['an unknown landmark that is not visible', { notVisible: { nose: 'hair' } }, 'unknown-landmark', ['notVisible', 'nose']],
    ['a landmark both placed and not visible', { notVisible: { acromion: 'sleeve' } }, 'marked-and-not-visible', ['landmarks', 'acromion']],
    ['a negative sd', { landmarks: { acromion: { x: 1, y: 1, sd: -1 } } }, 'sd-invalid', ['landmarks', 'acromion', 'sd']],
    ['an sd that is no number', { landmarks: { acromion: { x: 1, y: 1, sd: Number.NaN } } }, 'not-finite', ['landmarks', 'acromion', 'sd']],
    ['a plumb line that leaves the picture', { plumbLine: { top: { x: 5, y: -1 }, bottom: { x: 5, y: 900 } } }, 'landmark-out-of-picture', ['plumbLine', 'top']],
    ['a scale of no length', { scale: { from: { x: 1, y: 1 }, to: { x: 9, y: 1 }, lengthMm: 0 } }, 'scale-length-invalid', ['scale', 'lengthMm']],
    ['a scale whose length is no number', { scale: { from: { x: 1, y: 1 }, to: { x: 9, y: 1 }, lengthMm: Number.NaN } }, 'not-finite', ['scale', 'lengthMm']],
    ['a scale on one point', { scale: { from: { x: 1, y: 1 }, to: { x: 1, y: 1 }, lengthMm: 9 } }, 'scale-ends-coincide', ['scale', 'to']],
    ['a picture without width', { width: 0 }, 'picture-size-invalid', ['width']],
    ['a picture of endless height', { height: Infinity }, 'not-finite', ['height']],
  ]

  it.each(cases)('%s', (_, parts, code, path) => {
    expect(errorOf(sagittal(TRUNK, parts))).toEqual({ code, path })
  })

  it('accepts points on the very edge of the picture', () => {
    expect(measureMarking(sagittal({ acromion: [0, 0], greaterTrochanter: [1080, 1080] })).readings).toHaveLength(1)
  })

  it('gives nothing, without complaint, for a body without landmarks', () => {
    expect(measureMarking(sagittal({}, { facing: undefined })).readings).toEqual([])
  })

  it('withholds a midline shift over a base without width', () => {
    const result = measureMarking(frontal({ ankleCentreLeft: [500, 980], ankleCentreRight: [500, 900], sternalNotch: [520, 300] }))
    expect(result.withheld.find(item => item.measure === 'midlineShift')?.reason).toBe('degenerate')
  })
})
