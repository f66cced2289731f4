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

/** The calendar day in the zone at a moment. */
export function dayIn(timeZone, moment) {
  return new Intl.DateTimeFormat('en-CA', { timeZone, year: 'numeric', month: '2-digit', day: '2-digit' }).format(moment)
}

/** The zone of this machine. */
export const machineTimeZone = () => Intl.DateTimeFormat().resolvedOptions().timeZone || 'UTC'

/** Long enough for the longest visit of the scenario. */
const VISIT_MS = 60 * 60_000

/**
 * When a visit of the scenario began. One of day 0 whose time has not come yet is moved up, so that nothing lies in the future.
 * @param since the moment of the first seeding; its day is day 0.
 */
export function visitStart({ timeZone, since }, daysAgo, time) {
  const planned = momentIn(timeZone, daysBefore(dayIn(timeZone, since), daysAgo), time)
  const latest = new Date(Math.floor((since.getTime() - VISIT_MS) / 60_000) * 60_000)
  return planned < latest ? planned : latest
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
