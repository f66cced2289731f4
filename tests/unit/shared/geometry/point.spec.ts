import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { wrapDegrees } from '#shared/geometry/angle'
import { angleAt, distance, imagePoint, midpoint } from '#shared/geometry/point'

describe('wrapDegrees', () => {
  it.each([[0, 0], [180, 180], [-180, 180], [181, -179], [-181, 179], [540, 180], [720, 0], [-350, 10]])('takes %f to %f', (angle, expected) => {
    expect(wrapDegrees(angle) + 0).toBe(expected)
  })

  it('stays in (−180, 180] and keeps the direction', () => {
    fc.assert(fc.property(fc.double({ min: -1e5, max: 1e5, noNaN: true }), (angle) => {
      const wrapped = wrapDegrees(angle)
      expect(wrapped > -180 && wrapped <= 180).toBe(true)
      expect(Math.cos(wrapped * Math.PI / 180)).toBeCloseTo(Math.cos(angle * Math.PI / 180), 6)
    }))
  })
})

describe('angleAt', () => {
  const vertex = imagePoint(0, 0)

  it.each([[1, 0, 0, 1, 90], [1, 0, -1, 0, 180], [1, 0, 1, 0, 0], [1, 0, 1, 1, 45]])('between (%f, %f) and (%f, %f) is %f°', (ax, ay, bx, by, expected) => {
    expect(angleAt(vertex, imagePoint(ax, ay), imagePoint(bx, by))).toBeCloseTo(expected, 10)
    expect(angleAt(vertex, imagePoint(bx, by), imagePoint(ax, ay))).toBeCloseTo(expected, 10)
  })

  it('refuses a ray of no length', () => {
    expect(() => angleAt(vertex, vertex, imagePoint(1, 1))).toThrow(expect.objectContaining({ code: 'landmarks-coincide' }))
  })
})

describe('midpoint', () => {
  it('is as far from both ends', () => {
    const [a, b] = [imagePoint(3, 4), imagePoint(10, -2)]
    expect(distance(a, midpoint(a, b))).toBeCloseTo(distance(b, midpoint(a, b)), 10)
  })
})
