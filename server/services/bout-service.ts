import { uuidv7 } from '#server/adapters/id'
import { findBout, insertBout, lockBout, lockSession, updateBout } from '#server/database/queries/session-queries'
import type { Bout, BoutInput, BoutPatch } from '#shared/schemas/bout'
import type { Actor } from './actor'
import { AppError, violatedConstraint } from './app-error'
import { recordAudit } from './audit-service'
import { toBout } from './bout-shape'
import { changeClinic, readClinic } from './clinic-transaction'

/** Runs a write on a bout row; what the database refuses becomes an error at its field. */
async function withBoutRules<Result>(write: () => Promise<Result>): Promise<Result> {
  try {
    return await write()
  } catch (error) {
    const constraint = violatedConstraint(error)
    if (constraint === 'bout_no_overlap') throw new AppError('bout-overlaps', { issues: [{ path: 'startedAt', message: 'overlaps' }], cause: error })
    if (constraint === 'bout_order') throw new AppError('validation-failed', { issues: [{ path: 'endedAt', message: 'end-before-start' }], cause: error })
    throw error
  }
}

function checkSupport(weightOffKg: number | null | undefined, massKg: number | null): void {
  if (weightOffKg != null && massKg !== null && weightOffKg > massKg) {
    throw new AppError('support-above-mass', { issues: [{ path: 'weightOffKg', message: 'support-above-mass' }] })
  }
}

function moments({ startedAt, endedAt }: { startedAt?: string | undefined, endedAt?: string | null | undefined }) {
  return {
    ...(startedAt === undefined ? {} : { startedAt: new Date(startedAt) }),
    ...(endedAt === undefined ? {} : { endedAt: endedAt === null ? null : new Date(endedAt) }),
  }
}

/**
 * Adds a bout to a session; without `endedAt` it is running.
 * @throws AppError `session-not-found`, `bout-overlaps`, `support-above-mass`
 */
export function addBout(actor: Actor, sessionId: string, input: BoutInput): Promise<Bout> {
  return withBoutRules(() => changeClinic(actor, async (tx) => {
    const session = await lockSession(tx, actor, sessionId)
    if (!session) throw new AppError('session-not-found')
    checkSupport(input.weightOffKg, session.massKg)
    const row = await insertBout(tx, {
      ...input, ...moments(input), startedAt: new Date(input.startedAt), endedAt: input.endedAt ? new Date(input.endedAt) : null,
      id: uuidv7(), clinicId: actor.clinicId, patientId: session.patientId, sessionId,
    })
    await recordAudit(tx, actor, 'bout.create', { type: 'bout', id: row.id, patientId: row.patientId }, null, { startedAt: input.startedAt, endedAt: input.endedAt ?? null })
    return toBout(row, session.massKg)
  }))
}

/** @throws AppError `bout-not-found` */
export function readBout(actor: Actor, boutId: string): Promise<Bout> {
  return readClinic(actor, async (tx) => {
    const found = await findBout(tx, actor, boutId)
    if (!found) throw new AppError('bout-not-found')
    return toBout(found.bout, found.massKg)
  })
}

/**
 * Corrects or ends a bout; corrected times leave their trace in the audit trail.
 * @throws AppError `bout-not-found`, `stale-version` with the present state, `bout-overlaps`, `support-above-mass`
 */
export function changeBout(actor: Actor, boutId: string, version: number, patch: BoutPatch): Promise<Bout> {
  return withBoutRules(() => changeClinic(actor, async (tx) => {
    await lockBout(tx, boutId)
    const found = await findBout(tx, actor, boutId)
    if (!found) throw new AppError('bout-not-found')
    const before = found.bout
    if (before.version !== version) throw new AppError('stale-version', { current: toBout(before, found.massKg) })
    checkSupport(patch.weightOffKg, found.massKg)
    const { startedAt, endedAt, ...rest } = patch
    const after = await updateBout(tx, boutId, { ...rest, ...moments({ startedAt, endedAt }) })
    const times = (row: typeof before) => ({ startedAt: row.startedAt.toISOString(), endedAt: row.endedAt?.toISOString() ?? null, version: row.version })
    await recordAudit(tx, actor, 'bout.change', { type: 'bout', id: boutId, patientId: before.patientId }, times(before), { ...times(after), fields: Object.keys(patch) })
    return toBout(after, found.massKg)
  }))
}
