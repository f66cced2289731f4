import { findMember } from '#server/database/queries/account-queries'
import { deleteCareTeamMember, insertCareTeamMember, listCareTeam, lockPatient } from '#server/database/queries/patient-queries'
import type { CareTeamMember } from '#shared/schemas/patient'
import type { Actor } from './actor'
import { AppError } from './app-error'
import { recordAudit } from './audit-service'
import { changeClinic } from './clinic-transaction'

/**
 * Takes a therapist of the clinic onto the care team.
 * @throws AppError `patient-not-found`, `user-not-found` (also for someone who is no therapist), `already-on-care-team`
 */
export function joinCareTeam(actor: Actor, patientId: string, userId: string): Promise<CareTeamMember> {
  return changeClinic(actor, async (tx) => {
    if (!await lockPatient(tx, actor, patientId)) throw new AppError('patient-not-found')
    const member = await findMember(tx, userId)
    if (!member || member.disabledAt || !member.roles.includes('therapist')) throw new AppError('user-not-found')
    const joinedAt = await insertCareTeamMember(tx, { clinicId: actor.clinicId, patientId, userId })
    if (!joinedAt) throw new AppError('already-on-care-team')
    await recordAudit(tx, actor, 'care-team.join', { type: 'user', id: userId, patientId })
    return { userId, name: member.name, joinedAt: joinedAt.toISOString() }
  })
}

/**
 * Takes someone off the care team; they see the chart no longer from the next request on.
 * @throws AppError `patient-not-found`, `user-not-found`, `last-care-team-member`
 */
export function leaveCareTeam(actor: Actor, patientId: string, userId: string): Promise<void> {
  return changeClinic(actor, async (tx) => {
    if (!await lockPatient(tx, actor, patientId)) throw new AppError('patient-not-found')
    const team = await listCareTeam(tx, patientId)
    if (!team.some(member => member.userId === userId)) throw new AppError('user-not-found')
    if (team.length === 1) throw new AppError('last-care-team-member')
    await deleteCareTeamMember(tx, patientId, userId)
    await recordAudit(tx, actor, 'care-team.leave', { type: 'user', id: userId, patientId })
  })
}
