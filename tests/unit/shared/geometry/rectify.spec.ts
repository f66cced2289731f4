import { describe, expect, it } from 'vitest'
import { imagePoint } from '#shared/geometry/point'
import { fitHomography, type KnownPoint, rectificationError, rectifyPoint, unrectifyPoint } from '#shared/geometry/rectify'
import { referenceFile } from './reference-file'

type Pair = readonly [number, number]

interface OpenCvCase {
  readonly image: readonly Pair[]
  readonly plane: readonly Pair[]
  readonly probes: readonly Pair[]
  readonly rectified: readonly Pair[]
}

function known(image: readonly Pair[], plane: readonly Pair[]): KnownPoint[] {
  return image.map(([x, y], index) => {
    const [px, py] = plane[index] ?? [Number.NaN, Number.NaN]
    return { image: imagePoint(x, y), plane: { x: px, y: py } }
  })
}

const SQUARE: readonly Pair[] = [[0, 0], [1, 0], [1, 1], [0, 1]]

describe('fitHomography', () => {
  it('gives the worked projection of the unit square', () => {
    const h = fitHomography(known(SQUARE, [[0, 0], [4, 1], [3, 3], [1, 4]]))
    const expected = [12, 3, 0, 3, 12, 0, 2, 2, 1]
    // H is [[12,3,0],[3,12,0],[2,2,1]] up to scale only when its last entry is 1.
    h.forEach((entry, index) => expect(entry).toBeCloseTo(expected[index] ?? Number.NaN, 8))
    const centre = rectifyPoint(h, imagePoint(0.5, 0.5))
    expect(centre.x).toBeCloseTo(2.5, 10)
    expect(centre.y).toBeCloseTo(2.5, 10)
  })

  it('rectifies a leaning rectangle by the worked example', () => {
    const h = fitHomography(known([[100, 100], [500, 120], [480, 900], [120, 880]], [[0, 0], [100, 0], [100, 200], [0, 200]]))
    const at = rectifyPoint(h, imagePoint(300, 500))
    expect(at.x).toBeCloseTo(50.06785, 5)
    expect(at.y).toBeCloseTo(94.73682, 5)
  })

  // Source: OpenCV 4.6, tests/reference/rectification.py.
  it.each(referenceFile<readonly OpenCvCase[]>('rectification.json').map(item => [item.image.length, item] as const))('agrees with OpenCV on %i points', (_, item) => {
    const h = fitHomography(known(item.image, item.plane))
    item.probes.forEach(([x, y], index) => {
      const at = rectifyPoint(h, imagePoint(x, y))
      const [ex, ey] = item.rectified[index] ?? [Number.NaN, Number.NaN]
      expect(Math.hypot(at.x - ex, at.y - ey)).toBeLessThan(1e-4)
    })
  })

  it('is undone by unrectifyPoint', () => {
    const h = fitHomography(known([[100, 100], [500, 120], [480, 900], [120, 880]], [[0, 0], [100, 0], [100, 200], [0, 200]]))
    const back = unrectifyPoint(h, rectifyPoint(h, imagePoint(321, 456)))
    expect(back.x).toBeCloseTo(321, 8)
    expect(back.y).toBeCloseTo(456, 8)
  })

  it('passes through four points exactly', () => {
    const points = known([[100, 100], [500, 120], [480, 900], [120, 880]], [[0, 0], [100, 0], [100, 200], [0, 200]])
    expect(rectificationError(fitHomography(points), points)).toBeLessThan(1e-9)
  })

  it('asks for four points', () => {
    expect(() => fitHomography(known(SQUARE.slice(0, 3), SQUARE))).toThrow(expect.objectContaining({ code: 'not-enough-points' }))
  })

  it.each([
    ['three in a row', [[0, 0], [1, 0], [2, 0], [0, 1]]],
    ['all in a row', [[0, 0], [1, 1], [2, 2], [3, 3]]],
    ['two on one point', [[0, 0], [0, 0], [1, 1], [0, 1]]],
    ['all on one point', [[5, 5], [5, 5], [5, 5], [5, 5]]],
  ] as const)('refuses four points of which there are %s', (_, image) => {
    expect(() => fitHomography(known(image, SQUARE))).toThrow(expect.objectContaining({ code: 'points-on-a-line' }))
  })

  it('refuses numbers that are none', () => {
    expect(() => fitHomography(known([[0, Number.NaN], [1, 0], [1, 1], [0, 1]], SQUARE))).toThrow(expect.objectContaining({ code: 'not-finite' }))
  })
})
