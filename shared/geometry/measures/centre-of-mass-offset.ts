import { across, type AxisSign, type DualPoint, percentOf, span } from '../direction'
import { add, combine, type Dual, scaleBy } from '../dual'
import { defineMeasure, type MeasureLine, recipe } from '../measure-definition'
import { SEGMENT_MASSES, type SegmentMass } from '../segment-masses'

interface Chain {
  readonly acromion: DualPoint
  readonly trochanter: DualPoint
  readonly epicondyle: DualPoint
  readonly malleolus: DualPoint
  readonly metatarsal: DualPoint
}

/** Offset of a segment's centre from the ankle, weighted by how much of the body mass it stands for. */
function weighted(origin: DualPoint, proximal: DualPoint, distal: DualPoint, part: SegmentMass, count: number, facing: AxisSign): Dual {
  const share = part.massFraction * count
  return combine(
    across(origin, proximal, facing), share * (1 - part.centreFromProximal),
    across(origin, distal, facing), share * part.centreFromProximal,
  )
}

/** Horizontal distance of the centre of mass from the ankle in pixels; one leg stands for both. */
function offsetFromAnkle(chain: Chain, facing: AxisSign): Dual {
  const { acromion, trochanter, epicondyle, malleolus, metatarsal } = chain
  const legs = add(
    weighted(malleolus, malleolus, metatarsal, SEGMENT_MASSES.foot, 2, facing),
    weighted(malleolus, epicondyle, malleolus, SEGMENT_MASSES.leg, 2, facing),
  )
  const upper = add(
    weighted(malleolus, trochanter, epicondyle, SEGMENT_MASSES.thigh, 2, facing),
    weighted(malleolus, trochanter, acromion, SEGMENT_MASSES.headArmsTrunk, 1, facing),
  )
  return scaleBy(add(legs, upper), 1 / TOTAL)
}

const TOTAL = SEGMENT_MASSES.headArmsTrunk.massFraction
  + 2 * (SEGMENT_MASSES.foot.massFraction + SEGMENT_MASSES.leg.massFraction + SEGMENT_MASSES.thigh.massFraction)

const LINES: readonly MeasureLine[] = [
  { from: ['greaterTrochanter'], to: ['acromion'], segment: 'trunk' },
  { from: ['greaterTrochanter'], to: ['lateralEpicondyle'], segment: 'thigh' },
  { from: ['lateralMalleolus'], to: ['lateralEpicondyle'], segment: 'shank' },
  { from: ['lateralMalleolus'], to: ['fifthMetatarsal'], segment: 'foot' },
]

/** Centre of mass of the segment model in front of the ankle. Withheld when any support carries part of the weight. */
export const centreOfMassOffset = defineMeasure({
  id: 'centreOfMassOffset',
  reference: 'vertical',
  recipes: [
    recipe({
      views: ['sagittal'],
      landmarks: ['acromion', 'greaterTrochanter', 'lateralEpicondyle', 'lateralMalleolus', 'fifthMetatarsal'],
      unit: 'mm',
      needsScale: true,
      compute: (at, { facing, toMillimetres }) => toMillimetres(offsetFromAnkle({
        acromion: at('acromion'),
        trochanter: at('greaterTrochanter'),
        epicondyle: at('lateralEpicondyle'),
        malleolus: at('lateralMalleolus'),
        metatarsal: at('fifthMetatarsal'),
      }, facing)),
      lines: LINES,
      shownAt: ['lateralMalleolus'],
    }),
    recipe({
      views: ['sagittal'],
      landmarks: ['acromion', 'greaterTrochanter', 'lateralEpicondyle', 'lateralMalleolus', 'fifthMetatarsal', 'heel'],
      unit: '%',
      compute: (at, { facing }) => percentOf(offsetFromAnkle({
        acromion: at('acromion'),
        trochanter: at('greaterTrochanter'),
        epicondyle: at('lateralEpicondyle'),
        malleolus: at('lateralMalleolus'),
        metatarsal: at('fifthMetatarsal'),
      }, facing), span(at('heel'), at('fifthMetatarsal'))),
      lines: LINES,
      shownAt: ['lateralMalleolus'],
    }),
  ],
  changeFloor: { 'mm': 10, '%': 5 },
  segments: ['trunk', 'foot'],
  withheldWhen: 'supported',
  alwaysWarns: ['assumes-both-legs-alike'],
  source: 'Segment model: Winter, Biomechanics and Motor Control of Human Movement, Table 4.1, after Dempster; the acromion stands for the glenohumeral joint. Not judged.',
  cautions: ['acromion-for-shoulder', 'geometry-not-load', 'camera-roll', 'scale-in-plane', 'out-of-plane'],
})
