/** Days and times of a clinic, in its own time zone. */

const DAY_MS = 86_400_000

/** Minutes that the zone is ahead of UTC at a moment. */
function offsetMinutes(timeZone, moment) {
  const parts = Object.fromEntries(new Intl.DateTimeFormat('en-US', { timeZone, hourCycle: 'h23', year: 'numeric', month: '2-digit', day: '2-digit', hour: '2-digit', minute: '2-digit', second: '2-digit' }).formatToParts(moment).map(({ type, value }) => [type, value]))
  const asUtc = Date.UTC(+parts.year, +parts.month - 1, +parts.day, +parts.hour, +parts.minute, +parts.second)
  return Math.round((asUtc - Math.floor(moment.getTime() / 1000) * 1000) / 60_000)
}

/** The moment at which clocks in the zone show `day` (YYYY-MM-DD) and `time` (HH:MM). */
export function momentIn(timeZone, day, time) {
  const wanted = Date.parse(`${day}T${time}:00Z`)
  const first = wanted - offsetMinutes(timeZone, new Date(wanted)) * 60_000
  return new Date(wanted - offsetMinutes(timeZone, new Date(first)) * 60_000)
}

/** The calendar day in the zone, `days` before a moment. */
export function dayIn(timeZone, moment, days = 0) {
  return new Intl.DateTimeFormat('en-CA', { timeZone, year: 'numeric', month: '2-digit', day: '2-digit' }).format(new Date(moment.getTime() - days * DAY_MS))
}

/** Day 0 of the scenario: the latest day whose visits (the last ends before 17:00) are over. */
export function scenarioDay(timeZone, now) {
  const today = dayIn(timeZone, now)
  return momentIn(timeZone, today, '17:00') <= now ? today : dayIn(timeZone, now, 1)
}

/** `day` moved back by `days`. */
export function daysBefore(day, days) {
  return new Date(Date.parse(`${day}T12:00:00Z`) - days * DAY_MS).toISOString().slice(0, 10)
}

/** Birth date of someone who is `age` on `day`. `birthday` is MM-DD. */
export function birthDateFor(day, age, birthday) {
  const year = Number(day.slice(0, 4)) - age
  return `${day.slice(5) >= birthday ? year : year - 1}-${birthday}`
}
