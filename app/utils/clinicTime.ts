import { parseAbsolute, parseDate, parseDateTime, parseTime, toCalendarDate, toCalendarDateTime, toTime, toZoned } from '@internationalized/date'

/** Moments are kept in UTC and shown on the clinic's wall clock; these turn one into the other. `zone` is an IANA name. */

/** @returns the clinic's day of a moment, `2026-11-27`. */
export function clinicDay(moment: string, zone: string): string {
  return toCalendarDate(parseAbsolute(moment, zone)).toString()
}

/** @returns the clinic's clock time of a moment, `09:15:00`. */
export function clinicClock(moment: string, zone: string): string {
  return toTime(parseAbsolute(moment, zone)).toString().slice(0, 8)
}

/** @returns what a `datetime-local` field shows for a moment, to the second. */
export function toLocalField(moment: string, zone: string): string {
  return toCalendarDateTime(parseAbsolute(moment, zone)).toString().slice(0, 19)
}

/**
 * @param text what a `datetime-local` field holds. A time that the clock skips in spring is taken an hour later,
 * one that comes twice in autumn is taken as the first.
 * @returns the moment in UTC, or null when the text is no date and time.
 */
export function fromLocalField(text: string, zone: string): string | null {
  try {
    return toZoned(parseDateTime(text), zone).toAbsoluteString()
  } catch {
    return null
  }
}

/** @returns the moment of a clock time (`9:15`, `09:15:30`) on a clinic day, or null when it is no clock time. */
export function momentOn(day: string, clock: string, zone: string): string | null {
  try {
    const time = parseTime(clock.trim().padStart(clock.trim().indexOf(':') === 1 ? clock.trim().length + 1 : 0, '0'))
    return toZoned(toCalendarDateTime(parseDate(day), time), zone).toAbsoluteString()
  } catch {
    return null
  }
}

/** @returns whole years from a birth day to a day, both `2026-11-27`. */
export function ageOn(birthDay: string, day: string): number {
  const years = Number(day.slice(0, 4)) - Number(birthDay.slice(0, 4))
  return day.slice(5) < birthDay.slice(5) ? years - 1 : years
}

/** @returns whole weeks between two days, `2026-11-27`; negative when `to` lies before `from`. */
export function weeksBetween(from: string, to: string): number {
  return Math.floor((Date.parse(to) - Date.parse(from)) / 604_800_000)
}
