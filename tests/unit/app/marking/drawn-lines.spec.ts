import { describe, expect, it } from 'vitest'
import { EMPTY_DOCUMENT } from '~/marking/document'
import { bandTriangle, drawnLines } from '~/marking/drawn-lines'

const document = {
  ...EMPTY_DOCUMENT,
  landmarks: { acromion: { x: 500, y: 260 }, greaterTrochanter: { x: 510, y: 520 }, lateralEpicondyle: { x: 516, y: 760 } },
}

describe('drawnLines', () => {
  it('draws each line once, in the hue of its segment, as soon as both ends are marked', () => {
    const lines = drawnLines(document, 'sagittal', [])
    expect(lines.map(line => line.segment).sort()).toEqual(['thigh', 'trunk'])
    expect(lines.find(line => line.segment === 'trunk')).toMatchObject({ from: { x: 510, y: 520 }, to: { x: 500, y: 260 }, halfBandDeg: null })
  })
  it('gives a line the band of the reading that is its direction', () => {
    const readings = [{ measure: 'trunkInclination', low: -4, high: -1 }, { measure: 'hipFlexion', low: -9, high: 9 }]
    const lines = drawnLines(document, 'sagittal', readings)
    expect(lines.find(line => line.segment === 'trunk')?.halfBandDeg).toBe(1.5)
    expect(lines.find(line => line.segment === 'thigh')?.halfBandDeg).toBeNull()
  })
  it('draws frontal lines through the means of paired landmarks', () => {
    const frontal = {
      ...EMPTY_DOCUMENT,
      landmarks: { acromionLeft: { x: 600, y: 300 }, acromionRight: { x: 400, y: 310 }, asisLeft: { x: 560, y: 600 }, asisRight: { x: 440, y: 600 } },
    }
    const axis = drawnLines(frontal, 'frontal-anterior', []).find(line => line.from.x === 500 && line.from.y === 600)
    expect(axis?.to).toEqual({ x: 500, y: 305 })
  })
})

describe('bandTriangle', () => {
  it('opens from the beginning of the line by the band on either side', () => {
    const [line] = drawnLines(document, 'sagittal', [{ measure: 'trunkInclination', low: -4, high: 2 }])
    const triangle = line && bandTriangle(line)
    expect(triangle?.[0]).toEqual(line?.from)
    const direction = (index: 1 | 2) => triangle ? Math.atan2(triangle[index].y - 520, triangle[index].x - 510) * 180 / Math.PI : NaN
    const middle = Math.atan2(260 - 520, 500 - 510) * 180 / Math.PI
    expect(direction(1) - middle).toBeCloseTo(3, 9)
    expect(direction(2) - middle).toBeCloseTo(-3, 9)
  })
  it('is nothing without a band', () => {
    const [line] = drawnLines(document, 'sagittal', [])
    expect(line && bandTriangle(line)).toBeNull()
  })
})
