import { describe, expect, it } from 'vitest'
import { measureMarking } from '#shared/geometry/measure-marking'
import { drawnLines } from '~/marking/drawn-lines'

const body = {
  view: 'sagittal',
  width: 1440,
  height: 1080,
  facing: 'right',
  landmarks: { acromion: { x: 500, y: 260 }, greaterTrochanter: { x: 510, y: 520 }, lateralEpicondyle: { x: 516, y: 760 } },
} as const

describe('drawnLines', () => {
  it('draws each line once, as soon as both ends are marked, with the band of its reading', () => {
    const lines = drawnLines(body, measureMarking(body).readings)
    expect(lines.map(line => line.segment).sort()).toEqual(['thigh', 'trunk'])
    const trunk = lines.find(line => line.segment === 'trunk')
    expect(trunk).toMatchObject({ from: { x: 510, y: 520 }, to: { x: 500, y: 260 } })
    expect(trunk?.wedge?.halfAngle).toBeGreaterThan(1)
  })

  it('draws lines without bands where there is no reading', () => {
    expect(drawnLines(body, []).map(line => line.wedge)).toEqual([null, null])
  })

  it('draws the arm, which has no band', () => {
    const withArm = { ...body, landmarks: { ...body.landmarks, elbow: { x: 520, y: 400 }, wrist: { x: 620, y: 420 } } }
    const arms = drawnLines(withArm, measureMarking(withArm).readings).filter(line => line.segment === 'arm')
    expect(arms.map(line => [line.from.x, line.to.x, line.wedge])).toEqual([[500, 520, null], [520, 620, null]])
  })

  it('gives every line an id of its own', () => {
    const lines = drawnLines(body, measureMarking(body).readings)
    expect(new Set(lines.map(line => line.id)).size).toBe(lines.length)
  })
})
