import { compareReadings, isLikeSupport } from '#shared/geometry/change'
import type { Unit } from '#shared/geometry/reading'
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
export function changeOf(series: TimelineSeries, before: TimelineReading, after: TimelineReading): TimelineChange[] {
  // The near side does not make the lean of a trunk another thing, but the comparison wants to be told so.
  const found = compareReadings(asReading(before, series), asReading(after, series), { mdc95: null, supportBefore: before.supportPercent, supportAfter: after.supportPercent })
  if (!found) return []
  const { change, sd, threshold } = found
  return [{ series, before, after, change, sd, threshold, answer: answerOf(found.largerThanError, change, threshold, isLikeSupport(before.supportPercent, after.supportPercent)) }]
}

function answerOf(isLarger: boolean, change: number, threshold: number, isLike: boolean): TimelineChange['answer'] {
  if (!isLike) return 'support-differs'
  if (isLarger) return 'larger'
  const share = Math.abs(change) / threshold
  if (share >= 0.8) return 'on-limit'
  return share > 0.5 ? 'inside' : 'well-inside'
}

const UNITS: readonly Unit[] = ['deg', 'mm', '%', '1']

function asReading(reading: TimelineReading, series: TimelineSeries) {
  const { measure, definitionVersion, view, value, sd, low, high } = reading
  const unit = UNITS.find(known => known === reading.unit) ?? '1'
  return { measure, definitionVersion, view, value, unit, sd, low, high, warnings: [], ...(series.side ? { side: series.side } : {}) }
}
