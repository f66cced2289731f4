/** A body segment of the mass model: its share of body mass and where its centre lies from the proximal end. */
export interface SegmentMass {
  readonly massFraction: number
  readonly centreFromProximal: number
}

/**
 * Segment masses and centres. Source: Winter, Biomechanics and Motor Control of Human Movement, Table 4.1, after
 * Dempster. Foot: lateral malleolus → metatarsal head; leg: femoral condyle → malleolus; thigh: greater trochanter →
 * femoral condyle; head, arms and trunk: greater trochanter → glenohumeral joint. `headArmsTrunk` + 2 legs = 1.
 */
export const SEGMENT_MASSES = {
  foot: { massFraction: 0.0145, centreFromProximal: 0.5 },
  leg: { massFraction: 0.0465, centreFromProximal: 0.433 },
  thigh: { massFraction: 0.1, centreFromProximal: 0.433 },
  headArmsTrunk: { massFraction: 0.678, centreFromProximal: 0.626 },
} as const satisfies Record<string, SegmentMass>
