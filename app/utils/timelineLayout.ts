import { max, min } from 'd3-array'
import { scaleLinear } from 'd3-scale'
import type { TargetZone } from '#shared/geometry/target'
import { findMeasure } from '#shared/geometry/registry'

/** Where a row of the chart lies and how its values become heights. All lengths in CSS pixels, y down. */
export interface TimelineRow {
  kind: 'reading' | 'standing' | 'support'
  key: string
  series: TimelineSeries | null
  top: number
  bottom: number
  y: (value: number) => number
  ticks: number[]
  /** The part of the target that the row shows, as values; null when the measure has none. */
  zone: { low: number, high: number } | null
}

export interface TimelineLayout {
  rows: TimelineRow[]
  top: number
  bottom: number
  height: number
  x: (axisMs: number) => number
  weeks: { at: number, x: number }[]
}

interface LayoutOptions {
  series: readonly TimelineSeries[]
  days: readonly TimelineDay[]
  /** First and last moment of the axis. */
  from: number
  to: number
  width: number
  /** Rows of flags above the chart. */
  flagRows: number
  /** Names stand above their row instead of beside it. */
  isNarrow: boolean
}

const READING_HEIGHT = 150
const STANDING_HEIGHT = 98
const SUPPORT_HEIGHT = 76
const AXIS_HEIGHT = 48
const WEEK_MS = 604_800_000
const DAY_MS = 86_400_000
/** 5 January 1970 was a Monday. */
const MONDAY_MS = 4 * DAY_MS

/** Puts the rows under each other on one time axis, so that cause and effect line up. */
export function layTimeline(options: LayoutOptions): TimelineLayout {
  const { series, days, from, to, width, flagRows, isNarrow } = options
  const gap = isNarrow ? 44 : 26
  const top = 28 + 22 * flagRows
  const x = scaleLinear([from, to], [0, width])
  const rows: TimelineRow[] = []
  let y = top + (isNarrow ? 30 : 0)
  const add = (height: number, make: (rowTop: number, rowBottom: number) => TimelineRow) => {
    rows.push(make(y, y + height))
    y += height + gap
  }
  for (const one of series) add(READING_HEIGHT, (rowTop, rowBottom) => readingRow(one, rowTop, rowBottom))
  add(STANDING_HEIGHT, (rowTop, rowBottom) => standingRow(days, rowTop, rowBottom))
  add(SUPPORT_HEIGHT, (rowTop, rowBottom) => supportRow(days, rowTop, rowBottom))
  const bottom = y - gap + 8
  return { rows, top, bottom, height: bottom + AXIS_HEIGHT, x: ms => x(ms), weeks: weekTicks(from, to, width).map(at => ({ at, x: x(at) })) }
}

function readingRow(series: TimelineSeries, top: number, bottom: number): TimelineRow {
  const target = findMeasure(series.measure)?.defaultTarget ?? null
  const [low, high] = domainOf(series, target)
  const y = scaleLinear([low, high], [bottom, top])
  const zone = target ? { low: Math.max(low, target.low ?? low), high: Math.min(high, target.high ?? high) } : null
  return { kind: 'reading', key: series.key, series, top, bottom, y: value => y(value), ticks: y.ticks(4), zone: zone && zone.high > zone.low ? zone : null }
}

/** Holds every band, zero, and the nearer limit of the target, with some air. */
function domainOf(series: TimelineSeries, target: TargetZone | null): [number, number] {
  const low = min(series.readings, reading => reading.low) ?? 0
  const high = max(series.readings, reading => reading.high) ?? 1
  const isFarFromZero = low > 25 || high < -25
  const held = isFarFromZero ? [low, high] : [low, high, 0, ...(target?.high != null && target.high < high + 20 ? [target.high] : [])]
  const [floor = 0, roof = 1] = [min(held), max(held)]
  const air = Math.max((roof - floor) * 0.16, 0.1)
  return [floor - air, roof + air]
}

function standingRow(days: readonly TimelineDay[], top: number, bottom: number): TimelineRow {
  const longest = Math.max(60_000, max(days, day => day.totalMs) ?? 0)
  const stepMinutes = [0.5, 1, 2, 5, 10, 15, 30].find(step => longest / 60_000 / step <= 3.4) ?? 60
  const y = scaleLinear([0, longest * 1.04], [bottom, top])
  const ticks = Array.from({ length: Math.floor(longest / 60_000 / stepMinutes) + 1 }, (_, index) => index * stepMinutes * 60_000)
  return { kind: 'standing', key: 'standing', series: null, top, bottom, y: value => y(value), ticks, zone: null }
}

function supportRow(days: readonly TimelineDay[], top: number, bottom: number): TimelineRow {
  const most = Math.max(20, max(days, day => day.chief?.supportPercent ?? 0) ?? 0)
  const y = scaleLinear([0, most], [bottom, top])
  return { kind: 'support', key: 'support', series: null, top, bottom, y: value => y(value), ticks: y.ticks(2), zone: null }
}

/** Mondays, as many as fit with their dates under them. */
function weekTicks(from: number, to: number, width: number): number[] {
  const first = Math.ceil((from - MONDAY_MS) / WEEK_MS) * WEEK_MS + MONDAY_MS
  const weeks = Math.max(1, Math.floor((to - first) / WEEK_MS) + 1)
  const step = Math.max(1, Math.ceil(weeks / Math.max(2, Math.floor(width / 76))))
  return Array.from({ length: Math.ceil(weeks / step) }, (_, index) => first + index * step * WEEK_MS).filter(at => at <= to)
}
