/**
 * Makes a clinic and its first administrator, on a server that has none: no account exists by default.
 *
 *     STANDMARK_OWNER_DATABASE_URL=postgres://owner:…@host/standmark \
 *       npm run clinic:create -- --name "Name of the clinic" --time-zone Europe/Lisbon --email person@example.org --person "Their Name"
 *
 * The password is made here and shown once.
 */
import { randomBytes } from 'node:crypto'
import { parseArgs } from 'node:util'
import { hash } from '@node-rs/argon2'
import pg from 'pg'
import { v7 } from 'uuid'
import { StartError, complain, say } from './console.mjs'

/** The same cost as server/adapters/password.ts. */
const ARGON2ID = { algorithm: 2, memoryCost: 19_456, timeCost: 2, parallelism: 1 }

function readOptions() {
  const { values } = parseArgs({ options: { 'name': { type: 'string' }, 'time-zone': { type: 'string' }, 'units': { type: 'string', default: 'metric' }, 'email': { type: 'string' }, 'person': { type: 'string' } } })
  for (const name of ['name', 'time-zone', 'email', 'person']) {
    if (!Reflect.get(values, name)) throw new StartError(`--${name} is missing; the head of docker-local/create-clinic.mjs shows the call`)
  }
  try {
    new Intl.DateTimeFormat('en', { timeZone: values['time-zone'] })
  } catch (cause) {
    throw new StartError(`--time-zone ${values['time-zone']} is not a name of the IANA time zone database, such as Europe/Lisbon`, { cause })
  }
  return values
}

async function main() {
  const url = process.env.STANDMARK_OWNER_DATABASE_URL
  if (!url) throw new StartError('STANDMARK_OWNER_DATABASE_URL is not set: the address of the database with the role that owns it')
  const options = readOptions()
  const password = randomBytes(15).toString('base64url')
  const passwordHash = await hash(password, ARGON2ID)
  const client = new pg.Client({ connectionString: url, application_name: 'standmark-create-clinic' })
  await client.connect()
  try {
    const clinicId = v7()
    await client.query('begin')
    // Row-level security binds the owner too: the transaction names the clinic it writes.
    await client.query('select set_config(\'app.clinic_id\', $1, true)', [clinicId])
    await client.query('insert into clinic (id, name, time_zone, units) values ($1, $2, $3, $4)', [clinicId, options.name, options['time-zone'], options.units])
    const userId = v7()
    await client.query('insert into user_account (id, clinic_id, email, name, roles, password_hash) values ($1, $2, $3, $4, $5, $6)', [userId, clinicId, options.email, options.person, ['administrator'], passwordHash])
    await client.query('insert into audit_event (id, clinic_id, action, target_type, target_id, request_id) values ($1, $2, $3, $4, $5, $6)', [v7(), clinicId, 'clinic.create', 'clinic', clinicId, 'create-clinic'])
    await client.query('commit')
  } finally {
    await client.end()
  }
  say(`${options.name} is made. ${options.person} signs in with ${options.email} and this password, which is shown only now: ${password}`)
}

try {
  await main()
} catch (error) {
  complain(`standmark: ${error instanceof Error ? error.message : String(error)}`)
  process.exitCode = 1
}
