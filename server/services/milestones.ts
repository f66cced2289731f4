import { ASSISTANCE_LEVELS } from '#shared/schemas/bout'
import type { Milestone, TimelineBout } from '#shared/schemas/timeline'

/** A step of support smaller than this many points of % is noise of the scale, not a decision. */
const SUPPORT_STEP_POINTS = 5
const MINUTE_MS = 60_000

type Best = { supportPercent: number | null, helpers: number | null, assistance: number | null }

function stepsDown(bout: TimelineBout, best: Best): Milestone[] {
  const found: Milestone[] = []
  const add = (kind: Milestone['kind'], to: Milestone['to']) => found.push({ kind, at: bout.startedAt, sessionId: bout.sessionId, boutId: bout.id, to })
  if (bout.supportPercent !== null && best.supportPercent !== null && bout.supportPercent <= best.supportPercent - SUPPORT_STEP_POINTS) add('support-lowered', bout.supportPercent)
  if (bout.helpers !== null && best.helpers !== null && bout.helpers < best.helpers) add('fewer-helpers', bout.helpers)
  if (best.assistance !== null && ASSISTANCE_LEVELS.indexOf(bout.assistance) < best.assistance) add('less-assistance', bout.assistance)
  return found
}

function lower(now: number | null, before: number | null): number | null {
  if (now === null) return before
  return before === null ? now : Math.min(now, before)
}

/**
 * What was reached for the first time, from the bouts alone.
 * @param bouts finished and running ones, oldest first
 * @returns oldest first. Standing times count finished bouts; a step down of support, helpers or assistance counts
 * when it is below everything before it, support by 5 points of % or more.
 */
export function findMilestones(bouts: readonly TimelineBout[]): Milestone[] {
  const found: Milestone[] = []
  const reached = new Set<Milestone['kind']>()
  const once = (kind: Milestone['kind'], bout: TimelineBout, to: Milestone['to']) => {
    if (reached.has(kind)) return
    reached.add(kind)
    found.push({ kind, at: bout.endedAt ?? bout.startedAt, sessionId: bout.sessionId, boutId: bout.id, to })
  }
  let best: Best = { supportPercent: null, helpers: null, assistance: null }
  for (const bout of bouts) {
    found.push(...stepsDown(bout, best))
    best = {
      supportPercent: lower(bout.supportPercent, best.supportPercent),
      helpers: lower(bout.helpers, best.helpers),
      assistance: lower(ASSISTANCE_LEVELS.indexOf(bout.assistance), best.assistance),
    }
    const stoodMs = bout.durationMs ?? 0
    if (stoodMs >= MINUTE_MS) once('first-minute', bout, null)
    if (stoodMs >= MINUTE_MS && bout.weightOffKg === 0) once('first-unsupported-minute', bout, null)
    if (stoodMs >= 5 * MINUTE_MS) once('five-minutes', bout, null)
  }
  return found
}
