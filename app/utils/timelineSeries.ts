import { isLikeSupport } from '#shared/geometry/change'
import type { Segment, Side } from '#shared/geometry/landmarks'
import { findMeasure, MEASURES } from '#shared/geometry/registry'
import type { TimelineReading } from '#shared/schemas/timeline'

type WeakerSide = 'left' | 'right' | 'both'

/** The readings of one measure, and of one side where the side makes it another thing, oldest first. */
export interface TimelineSeries {
  /** `kneeFlexion.right`, `trunkInclination` */
  key: string
  measure: string
  side: Side | null
  /** How the side is spoken of; null where it does not matter. */
  role: 'weaker' | 'stronger' | Side | null
  unit: string
  /** Hue of its line: a joint takes the lower of its two segments. */
  segment: Segment | null
  segments: readonly Segment[]
  readings: TimelineReading[]
}

const LIMB_SEGMENTS: readonly Segment[] = ['thigh', 'shank', 'arm']

/** A knee belongs to one leg; the lean of the trunk is the same from either side. */
function sideThatMatters(reading: TimelineReading): Side | null {
  const measure = findMeasure(reading.measure)
  const isOfLimb = measure !== null && (measure.sided || measure.segments.some(segment => LIMB_SEGMENTS.includes(segment)))
  return isOfLimb ? reading.side ?? null : null
}

function roleOf(side: Side | null, weakerSide: WeakerSide): TimelineSeries['role'] {
  if (side === null || weakerSide === 'both') return side
  return side === weakerSide ? 'weaker' : 'stronger'
}

/** @returns every series that has readings: in the order of the measures, the weaker side first. */
export function toSeries(readings: readonly TimelineReading[], weakerSide: WeakerSide): TimelineSeries[] {
  const byKey = new Map<string, TimelineSeries>()
  for (const reading of readings) {
    const side = sideThatMatters(reading)
    // Another unit is another thing: an offset in percent of leg length does not join one in millimetres.
    const key = [reading.measure, side, reading.unit === 'deg' ? null : reading.unit].filter(Boolean).join('.')
    const segments = findMeasure(reading.measure)?.segments ?? []
    const series = byKey.get(key) ?? { key, measure: reading.measure, side, role: roleOf(side, weakerSide), unit: reading.unit, segment: segments.at(-1) ?? null, segments, readings: [] }
    series.readings.push(reading)
    byKey.set(key, series)
  }
  const order = (series: TimelineSeries) => MEASURES.findIndex(measure => measure.id === series.measure) * 2 + (series.role === 'stronger' ? 1 : 0)
  for (const series of byKey.values()) series.readings.sort((a, b) => a.at.localeCompare(b.at))
  return [...byKey.values()].sort((a, b) => order(a) - order(b))
}

/** Cuts a series where a line would join readings at unlike support: a gap in the line is a message. */
export function runsAtLikeSupport<Reading extends { supportPercent: number | null }>(readings: readonly Reading[]): Reading[][] {
  const runs: Reading[][] = []
  for (const reading of readings) {
    const run = runs.at(-1)
    if (run?.every(other => isLikeSupport(other.supportPercent, reading.supportPercent))) run.push(reading)
    else runs.push([reading])
  }
  return runs
}

/** @returns the earliest reading that may be compared with the last one, or undefined when there is no earlier one at like support. */
export function firstAtLikeSupport<Reading extends { supportPercent: number | null, at: string }>(readings: readonly Reading[]): Reading | undefined {
  const last = readings.at(-1)
  if (!last) return undefined
  const found = readings.find(reading => isLikeSupport(reading.supportPercent, last.supportPercent))
  return found === last ? undefined : found
}
