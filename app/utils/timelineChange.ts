import type { ReadingChange } from '#shared/geometry/change'
import { compareReadings, isLikeSupport } from '#shared/geometry/change'
import type { Side } from '#shared/geometry/landmarks'
import type { Unit } from '#shared/geometry/reading'
import type { ReadingJson } from '#shared/schemas/reading'
import type { TimelineReading } from '#shared/schemas/timeline'

/** A measure on two days and what to say about the difference. */
export interface TimelineChange {
  series: TimelineSeries
  before: TimelineReading
  after: TimelineReading
  change: number
  sd: number
  threshold: number
  answer: 'larger' | 'on-limit' | 'inside' | 'well-inside' | 'support-differs'
}

/**
 * Compares the last readings of two days, measure by measure. The rule is `compareReadings`; until the clinic's MDC95 is
 * known, the floor of the measure holds.
 */
export function changesBetween(series: readonly TimelineSeries[], before: TimelineDay, after: TimelineDay): TimelineChange[] {
  return series.flatMap((one) => {
    const [first, last] = [readingsOn(before, one).at(-1), readingsOn(after, one).at(-1)]
    return first && last ? changeOf(one, first, last) : []
  })
}

/** @returns one change, or none when the two cannot be compared at all. */
function changeOf(series: TimelineSeries, before: TimelineReading, after: TimelineReading): TimelineChange[] {
  const found = compareAtSupport(before, after, series.side)
  if (!found) return []
  const { change, sd, threshold } = found
  return [{ series, before, after, change, sd, threshold, answer: answerOf(found.largerThanError, change, threshold, isLikeSupport(before.supportPercent, after.supportPercent)) }]
}

/**
 * `compareReadings` for readings that came as JSON, the clinic's MDC95 unknown.
 * @param side the side where it makes the measure another thing; the near side does not change the lean of a trunk.
 */
export function compareAtSupport(before: SupportedReading, after: SupportedReading, side: Side | null): ReadingChange | null {
  return compareReadings(asReading(before, side), asReading(after, side), { mdc95: null, supportBefore: before.supportPercent, supportAfter: after.supportPercent })
}

type SupportedReading = ReadingJson & { supportPercent: number | null }

function answerOf(isLarger: boolean, change: number, threshold: number, isLike: boolean): TimelineChange['answer'] {
  if (!isLike) return 'support-differs'
  if (isLarger) return 'larger'
  const share = Math.abs(change) / threshold
  if (share >= 0.8) return 'on-limit'
  return share > 0.5 ? 'inside' : 'well-inside'
}

const UNITS: readonly Unit[] = ['deg', 'mm', '%', '1']

function asReading(reading: ReadingJson, side: Side | null) {
  const { measure, definitionVersion, view, value, sd, low, high } = reading
  const unit = UNITS.find(known => known === reading.unit) ?? '1'
  return { measure, definitionVersion, view, value, unit, sd, low, high, warnings: [], ...(side ? { side } : {}) }
}
