/**
 * A length of time as a clock reads it: `0:55`, `14:20`, `1:02:07`.
 * @param durationMs milliseconds; the fraction of a second is dropped, as a running clock does. Negative counts as zero.
 */
export function formatDuration(durationMs: number): string {
  const seconds = Math.max(0, Math.floor(durationMs / 1000))
  const [hours, minutes, rest] = [Math.floor(seconds / 3600), Math.floor(seconds / 60) % 60, seconds % 60]
  const two = (value: number) => String(value).padStart(2, '0')
  return hours > 0 ? `${hours}:${two(minutes)}:${two(rest)}` : `${minutes}:${two(rest)}`
}
