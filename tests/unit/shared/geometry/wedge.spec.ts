import { describe, expect, it } from 'vitest'
import { degrees } from '#shared/geometry/angle'
import { measureMarking } from '#shared/geometry/measure-marking'
import { angleAt, distance, imagePoint } from '#shared/geometry/point'
import { errorWedge, segmentLines } from '#shared/geometry/wedge'
import { frontal, FRONTAL_PAIRS, reading, sagittal, SAGITTAL_PAIRS } from './marking-bodies'

describe('errorWedge', () => {
  const from = imagePoint(500, 520)
  const to = imagePoint(540, 260)

  it('opens by 1.96 sd to either side of the line and is as long as it', () => {
    const wedge = errorWedge(from, to, degrees(2))
    for (const edge of wedge.edges) {
      expect(angleAt(from, edge, to)).toBeCloseTo(3.92, 6)
      expect(distance(from, edge)).toBeCloseTo(distance(from, to), 6)
    }
    expect(angleAt(from, wedge.edges[0], wedge.edges[1])).toBeCloseTo(7.84, 6)
  })

  it('stays a wedge when the line is hopelessly short', () => {
    expect(errorWedge(from, to, degrees(400)).halfAngle).toBe(60)
  })
})

describe('segmentLines', () => {
  it('draws trunk, thigh, shank, foot and head once each, with the wedge of its reading', () => {
    const body = sagittal(SAGITTAL_PAIRS)
    const { readings } = measureMarking(body)
    const lines = segmentLines(body, readings)
    expect(lines.map(line => line.segment).sort()).toEqual(['foot', 'head', 'head', 'shank', 'thigh', 'trunk'])
    const trunk = lines.find(line => line.measure === 'trunkInclination')
    expect(trunk?.wedge?.halfAngle).toBeCloseTo(1.96 * reading(measureMarking(body), 'trunkInclination').sd, 10)
  })

  it('draws mid-lines between the means of their ends', () => {
    const body = frontal(FRONTAL_PAIRS)
    const lean = segmentLines(body, measureMarking(body).readings).find(line => line.measure === 'trunkLean')
    expect(lean?.from).toEqual(imagePoint(535, 538))
    expect(lean?.to).toEqual(imagePoint(530, 305))
  })

  it('draws nothing that is not marked', () => {
    const body = sagittal({ acromion: [500, 260] })
    expect(segmentLines(body, measureMarking(body).readings)).toEqual([])
  })
})
