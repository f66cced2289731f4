import type { Milestone, Timeline, TimelineBout, TimelineReading } from '#shared/schemas/timeline'

/** What one day of the clinic holds. */
export interface TimelineDay {
  /** `2026-11-27` */
  day: string
  /** Noon of that day on the chart's axis, in milliseconds: the clinic's wall clock taken as UTC. */
  noon: number
  sessionIds: string[]
  bouts: TimelineBout[]
  readings: TimelineReading[]
  milestones: Milestone[]
  longestMs: number
  totalMs: number
  /** The bout that speaks for the day's support and help: its longest, else its first. */
  chief: TimelineBout | null
}

const HALF_DAY_MS = 43_200_000

/** @returns the days that hold a bout or a reading, oldest first. */
export function toDays(timeline: Timeline, zone: string): TimelineDay[] {
  const days = new Map<string, TimelineDay>()
  const dayOf = (moment: string) => {
    const day = clinicDay(moment, zone)
    const found = days.get(day) ?? { day, noon: Date.parse(day) + HALF_DAY_MS, sessionIds: [], bouts: [], readings: [], milestones: [], longestMs: 0, totalMs: 0, chief: null }
    days.set(day, found)
    return found
  }
  const addSession = (day: TimelineDay, sessionId: string) => {
    if (!day.sessionIds.includes(sessionId)) day.sessionIds.push(sessionId)
  }
  for (const bout of timeline.bouts) {
    const day = dayOf(bout.startedAt)
    day.bouts.push(bout)
    day.totalMs += bout.durationMs ?? 0
    day.longestMs = Math.max(day.longestMs, bout.durationMs ?? 0)
    if (!day.chief || (bout.durationMs ?? 0) > (day.chief.durationMs ?? 0)) day.chief = bout
    addSession(day, bout.sessionId)
  }
  for (const reading of timeline.readings) {
    const day = dayOf(reading.at)
    day.readings.push(reading)
    addSession(day, reading.sessionId)
  }
  for (const milestone of timeline.milestones) dayOf(milestone.at).milestones.push(milestone)
  return [...days.values()].sort((a, b) => a.noon - b.noon)
}

/** @returns the readings of a day that belong to a series, oldest first. */
export function readingsOn(day: TimelineDay, series: { readings: readonly TimelineReading[] }): TimelineReading[] {
  return series.readings.filter(reading => day.readings.includes(reading))
}
