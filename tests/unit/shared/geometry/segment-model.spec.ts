import { describe, expect, it } from 'vitest'
import { centreOfMass } from '#shared/geometry/segment-model'
import { SEGMENT_MASSES } from '#shared/geometry/segment-masses'

describe('centreOfMass', () => {
  // Source: worked example with the fractions of Winter, Table 4.1; metres, y up.
  it('gives the worked example', () => {
    const centre = centreOfMass({
      shoulder: { x: 0.02, y: 1.42 }, trochanter: { x: 0.04, y: 0.92 }, knee: { x: 0.02, y: 0.5 }, ankle: { x: 0, y: 0.08 }, metatarsal: { x: 0.12, y: 0.03 },
    })
    expect(centre.x).toBeCloseTo(0.02769406, 8)
    expect(centre.y).toBeCloseTo(1.01478402, 8)
  })

  it('shares out the whole body', () => {
    const { headArmsTrunk, thigh, leg, foot } = SEGMENT_MASSES
    expect(headArmsTrunk.massFraction + 2 * (thigh.massFraction + leg.massFraction + foot.massFraction)).toBeCloseTo(1, 12)
  })
})
