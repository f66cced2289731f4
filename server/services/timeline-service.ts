import { listTimelineBouts, listTimelineReadings, maySeeTimeline } from '#server/database/queries/timeline-queries'
import type { Timeline, TimelineBout, TimelineQuery, TimelineReading } from '#shared/schemas/timeline'
import type { Actor } from './actor'
import { AppError } from './app-error'
import { supportPercentOf, toBout } from './bout-shape'
import { readClinic } from './clinic-transaction'
import { findMilestones } from './milestones'
import { toReading } from './reading-shape'

type ReadingRow = Awaited<ReturnType<typeof listTimelineReadings>>[number]
type BoutRow = Awaited<ReturnType<typeof listTimelineBouts>>[number]

/** @returns a reading with its place on the timeline and the support it was taken at. */
export function toTimelineReading(row: ReadingRow): TimelineReading {
  return {
    ...toReading(row.reading),
    id: row.reading.id,
    stillId: row.stillId,
    clipId: row.clipId,
    sessionId: row.sessionId,
    boutId: row.boutId,
    markingVersion: row.reading.markingVersion,
    at: row.at.toISOString(),
    supportPercent: supportPercentOf(row.weightOffKg, row.massKg),
  }
}

function toTimelineBout({ bout, massKg }: BoutRow): TimelineBout {
  const { id, sessionId, startedAt, endedAt, durationMs, supportPercent, weightOffKg, assistance, helpers, exertion, buckles } = toBout(bout, massKg)
  return { id, sessionId, startedAt, endedAt, durationMs, supportPercent, weightOffKg, assistance, helpers, exertion, buckles }
}

function isInPeriod(at: string, query: TimelineQuery): boolean {
  return (!query.from || at >= query.from) && (!query.to || at <= query.to)
}

/**
 * One patient's readings, bouts and milestones by date. Milestones look at the whole history, also when a period is asked for:
 * a first time is a first time.
 * @throws AppError `patient-not-found`
 */
export function readTimeline(actor: Actor, patientId: string, query: TimelineQuery): Promise<Timeline> {
  return readClinic(actor, async (tx) => {
    if (!await maySeeTimeline(tx, actor, patientId)) throw new AppError('patient-not-found')
    const readings = await listTimelineReadings(tx, patientId, query)
    const bouts = (await listTimelineBouts(tx, patientId)).map(toTimelineBout)
    return {
      readings: readings.map(toTimelineReading),
      bouts: bouts.filter(bout => isInPeriod(bout.startedAt, query)),
      milestones: findMilestones(bouts).filter(milestone => isInPeriod(milestone.at, query)),
    }
  })
}
