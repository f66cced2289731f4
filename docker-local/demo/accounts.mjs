import { createHash } from 'node:crypto'
import { hash } from '@node-rs/argon2'
import { machineTimeZone } from './clinic-time.mjs'
import { PASSWORD } from './scenario.mjs'

/**
 * Clinics and accounts, written by the owner of the database: people are invited by people, and the first ones have nobody to
 * invite them. Every row has an id of its own making, so that writing twice is writing once.
 */

/** Argon2id with the parameters of the server (OWASP Password Storage Cheat Sheet). */
const ARGON2ID = { algorithm: 2, memoryCost: 19_456, timeCost: 2, parallelism: 1 }

/** A fixed id with the form of a UUIDv7 for a name of the scenario. */
export function fixedId(name) {
  const hex = createHash('sha256').update(`standmark demo ${name}`).digest('hex')
  return `01900000-0000-7${hex.slice(0, 3)}-8${hex.slice(3, 6)}-${hex.slice(6, 18)}`
}

/** Runs `work` in a transaction that may see and write the rows of one clinic. */
async function inClinic(client, clinicId, work) {
  await client.query('begin')
  try {
    await client.query('select set_config(\'app.clinic_id\', $1, true)', [clinicId])
    const result = await work()
    await client.query('commit')
    return result
  } catch (error) {
    await client.query('rollback')
    throw error
  }
}

/**
 * Puts a clinic and its members where they are not yet.
 * @returns its time zone and when its row was made: the scenario counts its days from there, also when seeding is taken up again later.
 */
export async function putClinic(client, clinic) {
  const clinicId = fixedId(clinic.key)
  const passwordHash = await hash(PASSWORD, ARGON2ID)
  return inClinic(client, clinicId, async () => {
    await client.query('insert into clinic (id, name, time_zone, units) values ($1, $2, $3, $4) on conflict (id) do nothing', [clinicId, clinic.name, clinic.timeZone === 'machine' ? machineTimeZone() : clinic.timeZone, clinic.units])
    for (const member of clinic.members) await putAccount(client, { clinicId, ...member, passwordHash })
    const { rows } = await client.query('select created_at, time_zone from clinic where id = $1', [clinicId])
    return { since: rows[0].created_at, timeZone: rows[0].time_zone }
  })
}

/** The account of a person whose chart exists by now. */
export async function putPatientAccount(client, clinic, account, patient) {
  const clinicId = fixedId(clinic.key)
  const passwordHash = await hash(PASSWORD, ARGON2ID)
  await inClinic(client, clinicId, () => putAccount(client, { clinicId, ...account, name: patient.name, roles: ['patient'], patientId: patient.id, passwordHash }))
}

async function putAccount(client, { clinicId, key, email, name, roles, patientId = null, passwordHash }) {
  await client.query(
    'insert into user_account (id, clinic_id, email, name, roles, password_hash, patient_id) values ($1, $2, $3, $4, $5, $6, $7) on conflict (id) do nothing',
    [fixedId(key), clinicId, email, name, roles, passwordHash, patientId],
  )
}

const SEEDED = 'demo.seed'

/** Whether a seeding has come to its end in this database. */
export function isSeeded(client, clinic) {
  const clinicId = fixedId(clinic.key)
  return inClinic(client, clinicId, async () => {
    const { rowCount } = await client.query('select 1 from audit_event where clinic_id = $1 and action = $2 limit 1', [clinicId, SEEDED])
    return rowCount > 0
  })
}

export function rememberSeeded(client, clinic) {
  const clinicId = fixedId(clinic.key)
  return inClinic(client, clinicId, () => client.query(
    'insert into audit_event (id, clinic_id, action, target_type, target_id, request_id) values ($1, $2, $3, $4, $5, $6) on conflict (id) do nothing',
    [fixedId(`${clinic.key} seeded`), clinicId, SEEDED, 'clinic', clinicId, 'demo-seed'],
  ))
}
