import { uuidv7 } from '#server/adapters/id'
import { findPatientOfClinic, insertOpening } from '#server/database/queries/patient-queries'
import type { Opening } from '#shared/schemas/patient'
import type { Actor } from './actor'
import { AppError } from './app-error'
import { recordAudit } from './audit-service'
import { changeClinic } from './clinic-transaction'
import { queueOpeningNotice } from './mail-service'

export const OPENING_MINUTES = 60

/**
 * Opens a chart of the clinic to someone outside its care team, for an hour, with a stated reason that is audited;
 * the clinic's administrators are told by mail.
 * @param by the patient's id, or the exact record number as it stands on paper.
 * @throws AppError `patient-not-found`
 */
export function openWithReason(actor: Actor, by: { id: string } | { recordNumber: string }, reason: string): Promise<Opening> {
  return changeClinic(actor, async (tx) => {
    const found = await findPatientOfClinic(tx, by)
    if (!found) throw new AppError('patient-not-found')
    const row = await insertOpening(tx, { id: uuidv7(), clinicId: actor.clinicId, patientId: found.id, userId: actor.userId, reason, minutes: OPENING_MINUTES })
    await recordAudit(tx, actor, 'patient.open-with-reason', { type: 'patient', id: found.id, patientId: found.id, reason }, null, { expiresAt: row.expiresAt.toISOString() })
    await queueOpeningNotice(tx, row.id)
    return { id: row.id, patientId: row.patientId, reason: row.reason, expiresAt: row.expiresAt.toISOString() }
  })
}
