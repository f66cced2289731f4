import { describe, expect, it } from 'vitest'
import { findMilestones } from '#server/services/milestones'
import type { TimelineBout } from '#shared/schemas/timeline'

const MINUTE_MS = 60_000

/** Bout number `day`, on that day at nine; unless said otherwise 30 s long, nothing known of support and helpers. */
function bout(day: number, fields: Partial<TimelineBout> & { minutes?: number | null } = {}): TimelineBout {
  const { minutes = 0.5, ...rest } = fields
  const start = Date.UTC(2026, 9, day, 9)
  return {
    id: `bout-${day}`, sessionId: `session-${day}`, startedAt: new Date(start).toISOString(), endedAt: minutes === null ? null : new Date(start + minutes * MINUTE_MS).toISOString(),
    durationMs: minutes === null ? null : minutes * MINUTE_MS, supportPercent: null, weightOffKg: null, assistance: 'dependent', helpers: null, exertion: null, buckles: null, ...rest,
  }
}

const found = (bouts: readonly TimelineBout[]) => findMilestones(bouts).map(({ kind, boutId, to }) => [kind, boutId, to])

describe('findMilestones', () => {
  it('finds nothing in nothing, and nothing to compare in the first bout', () => {
    expect(findMilestones([])).toEqual([])
    expect(found([bout(1, { supportPercent: 40, helpers: 2, assistance: 'partial' })])).toEqual([])
  })

  it('finds the first whole minute once, at the end of its bout', () => {
    const bouts = [bout(1, { minutes: 0.999 }), bout(2, { minutes: 1 }), bout(3, { minutes: 2 })]
    expect(findMilestones(bouts)).toEqual([{ kind: 'first-minute', at: bouts[1]?.endedAt, sessionId: 'session-2', boutId: 'bout-2', to: null }])
  })

  it('finds five minutes, from exactly 300 s on', () => {
    expect(found([bout(1, { minutes: 4.99 }), bout(2, { minutes: 5 })])).toEqual([['first-minute', 'bout-1', null], ['five-minutes', 'bout-2', null]])
  })

  it('finds the first minute without weight off the feet only where that was logged as nothing', () => {
    expect(found([bout(1, { minutes: 2 }), bout(2, { minutes: 2, weightOffKg: 10 }), bout(3, { minutes: 0.5, weightOffKg: 0 }), bout(4, { minutes: 1, weightOffKg: 0 })]))
      .toEqual([['first-minute', 'bout-1', null], ['first-unsupported-minute', 'bout-4', null]])
  })

  it('counts no standing time for a bout that is still running', () => {
    expect(found([bout(1, { minutes: null })])).toEqual([])
  })

  it('finds support lowered by five points or more below everything before it', () => {
    const support = (...percents: (number | null)[]) => found(percents.map((supportPercent, index) => bout(index + 1, { supportPercent })))
    expect(support(40, 35.1)).toEqual([])
    expect(support(40, 35)).toEqual([['support-lowered', 'bout-2', 35]])
    expect(support(40, 30, 40, 30)).toEqual([['support-lowered', 'bout-2', 30]])
    expect(support(40, null, 20)).toEqual([['support-lowered', 'bout-3', 20]])
    expect(support(40, 37, 34, 31)).toEqual([])
    expect(support(null, 10)).toEqual([])
  })

  it('finds fewer helpers and less assistance than ever before', () => {
    expect(found([bout(1, { helpers: 2, assistance: 'substantial' }), bout(2, { helpers: 1, assistance: 'dependent' }), bout(3, { helpers: 2, assistance: 'partial' }), bout(4, { helpers: 0, assistance: 'partial' })]))
      .toEqual([['fewer-helpers', 'bout-2', 1], ['less-assistance', 'bout-3', 'partial'], ['fewer-helpers', 'bout-4', 0]])
  })

  it('says several things of one bout, each once', () => {
    expect(found([bout(1, { supportPercent: 50, helpers: 2, assistance: 'dependent' }), bout(2, { minutes: 6, supportPercent: 0, weightOffKg: 0, helpers: 0, assistance: 'independent' })]))
      .toEqual([
        ['support-lowered', 'bout-2', 0], ['fewer-helpers', 'bout-2', 0], ['less-assistance', 'bout-2', 'independent'],
        ['first-minute', 'bout-2', null], ['first-unsupported-minute', 'bout-2', null], ['five-minutes', 'bout-2', null],
      ])
  })
})
