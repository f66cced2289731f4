import type { Bout } from '#shared/schemas/bout'

/** A camera writes the time when the recording ends, a little after the stand as a rule; clocks differ too. */
const GRACE_MS = 120_000

/**
 * The bout a clip most likely shows: the one that was going on, or had just ended, when the file was written.
 * @returns its id, or null when none fits: then the person says.
 */
export function matchBout(bouts: readonly Pick<Bout, 'id' | 'startedAt' | 'endedAt'>[], writtenAt: number): string | null {
  const fitting = bouts.filter(({ startedAt, endedAt }) =>
    Date.parse(startedAt) <= writtenAt && (endedAt === null || writtenAt <= Date.parse(endedAt) + GRACE_MS))
  const latest = fitting.sort((a, b) => a.startedAt.localeCompare(b.startedAt)).at(-1)
  return latest?.id ?? null
}
