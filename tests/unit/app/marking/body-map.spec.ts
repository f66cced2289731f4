import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { guidedLandmarks } from '#shared/geometry/landmarks'
import { BODY_MAP, bodyMapPoint, MAP_MEASURES, readingPoint, spreadLabels } from '~/marking/body-map'

const VIEWS = ['sagittal', 'frontal-anterior', 'frontal-posterior'] as const

describe('bodyMapPoint', () => {
  it('has a place inside the drawing for every landmark that a guide offers', () => {
    for (const view of VIEWS) {
      for (const { id } of guidedLandmarks(view)) {
        const point = bodyMapPoint(view, id, 'right', false)
        expect(point, `${view} ${id}`).not.toBeNull()
        expect(point && point.x > 0 && point.x < BODY_MAP.width && point.y > 0 && point.y < BODY_MAP.height, id).toBe(true)
      }
    }
  })
  it('shows the person as the picture does', () => {
    const x = (view: typeof VIEWS[number], id: string, mirrored = false, facing: 'left' | 'right' = 'right') => bodyMapPoint(view, id, facing, mirrored)?.x ?? NaN
    expect(x('sagittal', 'fifthMetatarsal')).toBeGreaterThan(x('sagittal', 'heel'))
    expect(x('sagittal', 'fifthMetatarsal', false, 'left')).toBeLessThan(x('sagittal', 'heel', false, 'left'))
    expect(x('frontal-anterior', 'acromionLeft')).toBeGreaterThan(x('frontal-anterior', 'acromionRight'))
    expect(x('frontal-posterior', 'acromionLeft')).toBeLessThan(x('frontal-posterior', 'acromionRight'))
    expect(x('frontal-anterior', 'acromionLeft', true)).toBeLessThan(x('frontal-anterior', 'acromionRight', true))
  })
})

describe('readingPoint', () => {
  it('has a place for every measure of the map', () => {
    for (const view of VIEWS) for (const measure of MAP_MEASURES[view]) expect(readingPoint(view, measure, undefined, 'right', false), measure).not.toBeNull()
  })
  it('puts a sided reading on its side', () => {
    const left = readingPoint('frontal-anterior', 'frontalKneeAngle', 'left', null, false)
    const right = readingPoint('frontal-anterior', 'frontalKneeAngle', 'right', null, false)
    expect(left && right && left.x > right.x).toBe(true)
  })
})

describe('spreadLabels', () => {
  it('leaves labels where they like to be when there is room', () => {
    expect(spreadLabels([{ y: 50, height: 40 }, { y: 200, height: 60 }], 500)).toEqual([50, 200])
  })
  it('moves crowded labels apart and keeps their order', () => {
    expect(spreadLabels([{ y: 100, height: 40 }, { y: 90, height: 40 }], 500)).toEqual([130, 90])
  })
  it('never lets one cover another, and stays inside while they fit', () => {
    const wishes = fc.array(fc.record({ y: fc.integer({ min: -50, max: 650 }), height: fc.integer({ min: 10, max: 60 }) }), { maxLength: 9 })
    fc.assert(fc.property(wishes, (labels) => {
      const middles = spreadLabels(labels, 580)
      const boxes = labels.map(({ height }, index) => ({ top: (middles[index] ?? NaN) - height / 2, bottom: (middles[index] ?? NaN) + height / 2 }))
        .sort((a, b) => a.top - b.top)
      boxes.forEach((box, index) => expect(box.top).toBeGreaterThanOrEqual((boxes[index - 1]?.bottom ?? 0) - 1e-9))
      expect(boxes.at(-1)?.bottom ?? 0).toBeLessThanOrEqual(580 + 1e-9)
    }))
  })
})
