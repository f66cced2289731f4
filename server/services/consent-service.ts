import { uuidv7 } from '#server/adapters/id'
import { findConsent, findPatient, insertConsent, type listConsents, withdrawConsentRow } from '#server/database/queries/patient-queries'
import type { Consent, ConsentInput } from '#shared/schemas/consent'
import type { Actor } from './actor'
import { AppError } from './app-error'
import { recordAudit } from './audit-service'
import { changeClinic } from './clinic-transaction'

type Row = Awaited<ReturnType<typeof listConsents>>[number]

/** @returns a consent as the interface shows it. */
export function toConsent(row: Row): Consent {
  return {
    ...row.consent,
    createdAt: row.consent.createdAt.toISOString(),
    withdrawnAt: row.consent.withdrawnAt?.toISOString() ?? null,
    recordedBy: row.recordedBy,
    withdrawnBy: row.withdrawnBy,
  }
}

/**
 * Records a consent that was given.
 * @throws AppError `patient-not-found`
 */
export function giveConsent(actor: Actor, patientId: string, input: ConsentInput): Promise<Consent> {
  return changeClinic(actor, async (tx) => {
    if (!await findPatient(tx, actor, patientId)) throw new AppError('patient-not-found')
    const id = uuidv7()
    await insertConsent(tx, { id, clinicId: actor.clinicId, patientId, recordedById: actor.userId, ...input })
    await recordAudit(tx, actor, 'consent.give', { type: 'consent', id, patientId }, null, { kind: input.kind, relation: input.givenByRelation })
    const row = await findConsent(tx, actor, id)
    if (!row) throw new AppError('consent-not-found')
    return toConsent(row)
  })
}

/**
 * Withdraws a consent. The record stays; what needed the consent stops at the next request.
 * @throws AppError `consent-not-found`, `consent-withdrawn` when it was withdrawn before
 */
export function withdrawConsent(actor: Actor, consentId: string): Promise<Consent> {
  return changeClinic(actor, async (tx) => {
    const before = await findConsent(tx, actor, consentId)
    if (!before) throw new AppError('consent-not-found')
    if (!await withdrawConsentRow(tx, consentId, actor.userId)) throw new AppError('consent-withdrawn')
    await recordAudit(tx, actor, 'consent.withdraw', { type: 'consent', id: consentId, patientId: before.consent.patientId }, null, { kind: before.consent.kind })
    const row = await findConsent(tx, actor, consentId)
    if (!row) throw new AppError('consent-not-found')
    return toConsent(row)
  })
}
