import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { imagePoint } from '#shared/geometry/point'
import { clampToPicture, clampViewport, fitViewport, isFitted, MAX_SCALE, panBy, resizeStage, revealPoint, stagePoint, toImage, toStage, zoomAt } from '~/marking/viewport'
import type { Viewport } from '~/marking/viewport'

const PICTURE = { width: 1440, height: 1080 }
const STAGE = { width: 960, height: 640 }
const fitted = fitViewport(STAGE, PICTURE)

const sizes = fc.record({ width: fc.integer({ min: 50, max: 4000 }), height: fc.integer({ min: 50, max: 4000 }) })
const anyView: fc.Arbitrary<Viewport> = fc.tuple(sizes, sizes, fc.double({ min: 0.2, max: 50, noNaN: true }), fc.integer({ min: -3000, max: 3000 }), fc.integer({ min: -3000, max: 3000 }))
  .map(([stage, picture, factor, dx, dy]) => panBy(zoomAt(fitViewport(stage, picture), stagePoint(stage.width / 3, stage.height / 2), factor), dx, dy))

describe('fitViewport', () => {
  it('shows the whole picture in the middle of the stage', () => {
    expect(fitted.scale).toBeCloseTo(640 / 1080, 12)
    expect(toStage(fitted, imagePoint(720, 540))).toEqual({ x: 480, y: 320 })
    expect(toStage(fitted, imagePoint(0, 0)).y).toBeCloseTo(0, 9)
  })
  it('refuses a size of nothing', () => {
    expect(() => fitViewport({ width: 0, height: 10 }, PICTURE)).toThrow(RangeError)
  })
})

describe('toImage', () => {
  it('is the inverse of toStage at any zoom', () => {
    fc.assert(fc.property(anyView, fc.double({ min: 0, max: 4000, noNaN: true }), fc.double({ min: 0, max: 4000, noNaN: true }), (view, x, y) => {
      const back = toImage(view, toStage(view, imagePoint(x, y)))
      expect(back.x).toBeCloseTo(x, 6)
      expect(back.y).toBeCloseTo(y, 6)
    }))
  })
})

describe('zoomAt', () => {
  it('keeps the place under the pointer where it is, away from the limits', () => {
    const at = stagePoint(500, 300)
    const before = toImage(fitted, at)
    const closer = zoomAt(fitted, at, 4)
    expect(closer.scale).toBeCloseTo(fitted.scale * 4, 12)
    expect(toStage(closer, before).x).toBeCloseTo(500, 9)
    expect(toStage(closer, before).y).toBeCloseTo(300, 9)
  })
  it('stays between all in sight and the closest look', () => {
    expect(isFitted(zoomAt(fitted, stagePoint(0, 0), 0.01))).toBe(true)
    expect(zoomAt(fitted, stagePoint(0, 0), 10_000).scale).toBe(MAX_SCALE)
  })
  it('returns to the fitted view by zooming out', () => {
    const back = zoomAt(zoomAt(fitted, stagePoint(10, 600), 7), stagePoint(900, 5), 1 / 70)
    expect(back.offset.x).toBeCloseTo(fitted.offset.x, 9)
    expect(back.offset.y).toBeCloseTo(fitted.offset.y, 9)
  })
  it('refuses a factor that is not positive', () => {
    expect(() => zoomAt(fitted, stagePoint(0, 0), 0)).toThrow(RangeError)
    expect(() => zoomAt(fitted, stagePoint(0, 0), Number.NaN)).toThrow(RangeError)
  })
})

describe('panBy', () => {
  it('never pushes the picture off the stage', () => {
    fc.assert(fc.property(anyView, (view) => {
      const topLeft = toStage(view, imagePoint(0, 0))
      const bottomRight = toStage(view, imagePoint(view.picture.width, view.picture.height))
      expect(topLeft.x).toBeLessThan(view.stage.width)
      expect(topLeft.y).toBeLessThan(view.stage.height)
      expect(bottomRight.x).toBeGreaterThan(0)
      expect(bottomRight.y).toBeGreaterThan(0)
      expect(clampViewport(view)).toEqual(view)
    }))
  })
  it('does not move a fitted picture', () => {
    expect(panBy(fitted, 100, -40)).toEqual(fitted)
  })
})

describe('resizeStage', () => {
  it('keeps a fitted picture fitted', () => {
    expect(resizeStage(fitted, { width: 400, height: 900 })).toEqual(fitViewport({ width: 400, height: 900 }, PICTURE))
  })
  it('keeps the middle of a zoomed picture in the middle', () => {
    const zoomed = zoomAt(fitted, stagePoint(480, 320), 6)
    const middle = toImage(zoomed, stagePoint(480, 320))
    const resized = resizeStage(zoomed, { width: 700, height: 500 })
    expect(toStage(resized, middle).x).toBeCloseTo(350, 6)
    expect(resized.scale).toBe(zoomed.scale)
  })
})

describe('revealPoint', () => {
  it('moves a hidden place to the wanted distance from the edge and a visible one not at all', () => {
    const zoomed = zoomAt(fitted, stagePoint(480, 320), 8)
    expect(toStage(zoomed, imagePoint(600, 540)).x).toBeLessThan(40)
    const revealed = revealPoint(zoomed, imagePoint(600, 540), 40)
    expect(toStage(revealed, imagePoint(600, 540)).x).toBeCloseTo(40, 9)
    expect(revealPoint(zoomed, imagePoint(720, 540), 40)).toEqual(zoomed)
  })
})

describe('clampToPicture', () => {
  it('brings a place outside to the border', () => {
    expect(clampToPicture(PICTURE, imagePoint(-3, 2000))).toEqual({ x: 0, y: 1080 })
    expect(clampToPicture(PICTURE, imagePoint(12.5, 7))).toEqual({ x: 12.5, y: 7 })
  })
})
