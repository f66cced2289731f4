import { SEGMENT_MASSES, type SegmentMass } from './segment-masses'

/** A joint in any right-angled plane; the result comes in the same unit and axes. */
export interface JointPoint {
  readonly x: number
  readonly y: number
}

/** Joints of the side that is seen; the other leg is taken to be alike. */
export interface SegmentChain {
  readonly shoulder: JointPoint
  readonly trochanter: JointPoint
  readonly knee: JointPoint
  readonly ankle: JointPoint
  readonly metatarsal: JointPoint
}

function addSegment(sum: JointPoint, proximal: JointPoint, distal: JointPoint, part: SegmentMass, count: number): JointPoint {
  const mass = part.massFraction * count
  const along = part.centreFromProximal
  return {
    x: sum.x + mass * (proximal.x + along * (distal.x - proximal.x)),
    y: sum.y + mass * (proximal.y + along * (distal.y - proximal.y)),
  }
}

/**
 * Centre of mass of a standing body from one side, both legs alike. Pointless while support or arms carry weight: the caller withholds
 * it then.
 * Source: Winter, Biomechanics and Motor Control of Human Movement, Table 4.1, after Dempster.
 */
export function centreOfMass(chain: SegmentChain): JointPoint {
  const { shoulder, trochanter, knee, ankle, metatarsal } = chain
  const { foot, leg, thigh, headArmsTrunk } = SEGMENT_MASSES
  const withTrunk = addSegment({ x: 0, y: 0 }, trochanter, shoulder, headArmsTrunk, 1)
  const withThighs = addSegment(withTrunk, trochanter, knee, thigh, 2)
  const withLegs = addSegment(withThighs, knee, ankle, leg, 2)
  return addSegment(withLegs, ankle, metatarsal, foot, 2)
}
