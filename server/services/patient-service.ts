import { uuidv7 } from '#server/adapters/id'
import type { Transaction } from '#server/database/client'
import {
  findOpeningEnd, findPatient, insertCareTeamMember, insertPatient, isOnCareTeam, listCareTeam, listConsents, listPatients, lockPatient,
  longestBoutOf, updatePatient,
} from '#server/database/queries/patient-queries'
import { lastReading } from '#server/database/queries/timeline-queries'
import type { ListOf } from '#shared/schemas/common'
import type { Chart, Patient, PatientInput, PatientListQuery, PatientPatch, PatientRow } from '#shared/schemas/patient'
import type { Actor } from './actor'
import { AppError, violatedConstraint } from './app-error'
import { recordAudit } from './audit-service'
import { changeClinic, readClinic } from './clinic-transaction'
import { toConsent } from './consent-service'
import { toReading } from './reading-shape'

type Row = NonNullable<Awaited<ReturnType<typeof findPatient>>>

function toPatient(row: Row): Patient {
  return { ...row, createdAt: row.createdAt.toISOString(), updatedAt: row.updatedAt.toISOString() }
}

/** The audit trail names the fields that changed; names and numbers of people stay in the record itself. */
function changedFields(before: Row, after: Row): Record<string, unknown> {
  const keys = Object.keys(after).filter(key => key !== 'updatedAt' && JSON.stringify(Reflect.get(before, key)) !== JSON.stringify(Reflect.get(after, key)))
  return { fields: keys, version: after.version }
}

/** Runs a write on a patient row; a record number that is taken becomes an error at its field. */
async function withRecordNumber<Result>(write: () => Promise<Result>): Promise<Result> {
  try {
    return await write()
  } catch (error) {
    if (violatedConstraint(error) !== 'patient_record_number') throw error
    throw new AppError('record-number-taken', { issues: [{ path: 'recordNumber', message: 'taken' }], cause: error })
  }
}

/** @returns a page of the patients this person may see. */
export function findPatients(actor: Actor, query: PatientListQuery): Promise<ListOf<PatientRow>> {
  return readClinic(actor, async (tx) => {
    const { rows, total } = await listPatients(tx, actor, query)
    const items = rows.map(row => ({ ...toPatient(row.patient), lastSessionAt: row.lastSessionAt?.toISOString() ?? null, longestBoutMs: row.longestBoutMs }))
    return { items, total, page: query.page, pageSize: query.pageSize }
  })
}

/**
 * Creates a patient; who creates joins the care team.
 * @throws AppError `record-number-taken`
 */
export function createPatient(actor: Actor, input: PatientInput): Promise<Patient> {
  return withRecordNumber(() => changeClinic(actor, async (tx) => {
    const row = await insertPatient(tx, { id: uuidv7(), clinicId: actor.clinicId, ...input })
    await insertCareTeamMember(tx, { clinicId: actor.clinicId, patientId: row.id, userId: actor.userId })
    await recordAudit(tx, actor, 'patient.create', { type: 'patient', id: row.id, patientId: row.id }, null, { version: row.version })
    return toPatient(row)
  }))
}

async function accessOf(tx: Transaction, actor: Actor, patientId: string): Promise<Chart['access']> {
  if (await isOnCareTeam(tx, actor.userId, patientId)) return { kind: 'care-team', expiresAt: null }
  return { kind: 'opening', expiresAt: (await findOpeningEnd(tx, actor.userId, patientId))?.toISOString() ?? null }
}

/**
 * The chart: the patient, care team, consents and the two numbers of its header. Opening it is audited.
 * @throws AppError `patient-not-found` for an absent one and for one this person may not see
 */
export function openChart(actor: Actor, patientId: string): Promise<Chart> {
  return changeClinic(actor, async (tx) => {
    const row = await findPatient(tx, actor, patientId)
    if (!row) throw new AppError('patient-not-found')
    const [team, consents, access, longestBoutMs, trunk] = [
      await listCareTeam(tx, patientId), await listConsents(tx, patientId), await accessOf(tx, actor, patientId),
      await longestBoutOf(tx, patientId), await lastReading(tx, patientId, 'trunkInclination'),
    ]
    await recordAudit(tx, actor, 'patient.open', { type: 'patient', id: patientId, patientId })
    return {
      ...toPatient(row),
      careTeam: team.map(member => ({ ...member, joinedAt: member.joinedAt.toISOString() })),
      consents: consents.map(toConsent),
      access,
      longestBoutMs,
      lastTrunkReading: trunk ? { ...toReading(trunk), at: trunk.at.toISOString() } : null,
    }
  })
}

/**
 * Changes a patient.
 * @throws AppError `patient-not-found`, `stale-version` with the present state, `record-number-taken`
 */
export function changePatient(actor: Actor, patientId: string, version: number, patch: PatientPatch): Promise<Patient> {
  return withRecordNumber(() => changeClinic(actor, async (tx) => {
    const before = await lockPatient(tx, actor, patientId)
    if (!before) throw new AppError('patient-not-found')
    if (before.version !== version) throw new AppError('stale-version', { current: toPatient(before) })
    const after = await updatePatient(tx, patientId, patch)
    await recordAudit(tx, actor, 'patient.change', { type: 'patient', id: patientId, patientId }, { version: before.version }, changedFields(before, after))
    return toPatient(after)
  }))
}
