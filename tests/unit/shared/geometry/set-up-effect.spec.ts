import { describe, expect, it } from 'vitest'
import { degrees } from '#shared/geometry/angle'
import { effectOfNearness, effectOfTurn } from '#shared/geometry/set-up-effect'
import { sagittal } from './marking-bodies'

describe('effectOfTurn', () => {
  it('finds the 20° behind a trunk that shows 17.4952° when turned by 30°', () => {
    const shown = 17.4952 * Math.PI / 180
    const body = sagittal({ greaterTrochanter: [500, 600], acromion: [500 + 260 * Math.tan(shown), 340] })
    const [effect] = effectOfTurn(body, degrees(30))
    expect(effect).toMatchObject({ measure: 'trunkInclination', unit: 'deg' })
    expect(effect?.shown).toBeCloseTo(17.4952, 6)
    expect(effect?.corrected).toBeCloseTo(20, 3)
  })

  it('changes nothing for a person who stands square', () => {
    const body = sagittal({ greaterTrochanter: [500, 600], acromion: [540, 340], lateralEpicondyle: [510, 800] })
    for (const effect of effectOfTurn(body, degrees(0))) expect(effect.corrected).toBeCloseTo(effect.shown, 10)
  })

  it('gives up on a quarter turn', () => {
    expect(() => effectOfTurn(sagittal({}), degrees(90))).toThrow(expect.objectContaining({ code: 'out-of-range' }))
  })
})

describe('effectOfNearness', () => {
  it('draws a nearer shoulder back toward the picture centre', () => {
    const scale = { from: { x: 100, y: 100 }, to: { x: 100, y: 600 }, lengthMm: 1000 }
    const body = sagittal({ acromion: [640, 540], lateralMalleolus: [540, 980] }, { scale })
    const effect = effectOfNearness(body, ['acromion'], { distance: 3, nearer: 0.3 }).find(one => one.measure === 'plumbOffset.acromion')
    expect(effect?.shown).toBeCloseTo(200, 8)
    expect(effect?.corrected).toBeCloseTo(180, 8)
  })
})
