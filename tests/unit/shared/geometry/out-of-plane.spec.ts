import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { degrees } from '#shared/geometry/angle'
import { falseTilt, projectedAngle, unprojectedAngle } from '#shared/geometry/out-of-plane'
import { apparentOffset, correctedOffset } from '#shared/geometry/parallax'

describe('projectedAngle', () => {
  // Source: tan θ′ = tan θ · cos φ, worked by hand calculator.
  it.each([[20, 30, 17.4952], [45, 45, 35.2644]])('shows %f° turned by %f° as %f°', (angle, turn, expected) => {
    expect(projectedAngle(degrees(angle), degrees(turn))).toBeCloseTo(expected, 4)
  })

  it('is undone by unprojectedAngle', () => {
    const angle = fc.double({ min: -179, max: 179, noNaN: true })
    const turn = fc.double({ min: -80, max: 80, noNaN: true })
    fc.assert(fc.property(angle, turn, (one, other) => {
      expect(unprojectedAngle(projectedAngle(degrees(one), degrees(other)), degrees(other))).toBeCloseTo(one, 6)
    }))
  })

  it('cannot be undone at a quarter turn', () => {
    expect(() => unprojectedAngle(degrees(10), degrees(90))).toThrow(expect.objectContaining({ code: 'out-of-range' }))
  })
})

describe('falseTilt', () => {
  it('of shoulders 0.5 m above the lens, turned by 15° at 3 m, is 2.557°', () => {
    expect(falseTilt(0.5, degrees(15), 3)).toBeCloseTo(2.557, 3)
  })

  it('refuses a camera at no distance', () => {
    expect(() => falseTilt(0.5, degrees(15), 0)).toThrow(expect.objectContaining({ code: 'out-of-range' }))
  })

  // A pinhole camera drawn out in full: shoulders 0.36 m apart, turned about the vertical axis.
  it('agrees with a pinhole camera to 1 %', () => {
    const half = 0.18
    const turn = 15 * Math.PI / 180
    const project = (side: number) => {
      const depth = 3 - side * half * Math.sin(turn)
      return { x: side * half * Math.cos(turn) / depth, y: 0.5 / depth }
    }
    const [near, far] = [project(1), project(-1)]
    const tilt = Math.atan2(near.y - far.y, near.x - far.x) * 180 / Math.PI
    expect(falseTilt(0.5, degrees(15), 3) / tilt).toBeCloseTo(1, 2)
  })
})

describe('apparentOffset', () => {
  it('shows a point 0.3 m nearer than a plane at 3 m a ninth further out', () => {
    expect(apparentOffset(90, 3, 0.3)).toBeCloseTo(100, 10)
  })

  it('is undone by correctedOffset', () => {
    expect(correctedOffset(apparentOffset(-40, 3, -0.2), 3, -0.2)).toBeCloseTo(-40, 10)
  })

  it('refuses a point at the camera', () => {
    expect(() => apparentOffset(1, 3, 3)).toThrow(expect.objectContaining({ code: 'out-of-range' }))
  })
})
