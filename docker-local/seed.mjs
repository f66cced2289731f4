/**
 * Fills a demo deployment with the invented clinic of `demo/scenario.mjs`, once. Safe to run again, and after being cut off: what is
 * there stays as it is, what is missing is added.
 *
 *     STANDMARK_MODE=demo STANDMARK_OWNER_DATABASE_URL=… STANDMARK_BASE_URL=http://127.0.0.1:3000 node docker-local/seed.mjs
 *
 * Needs the running server with its worker. The owner's address makes clinics and accounts, which nobody could invite; everything
 * else goes through the HTTP interface, signed in as the demo therapists, so that every rule of the house holds for it too.
 */
import pg from 'pg'
import { StartError, complain, complainAbout, say } from './console.mjs'
import { fixedId, isSeeded, putClinic, putPatientAccount, rememberSeeded } from './demo/accounts.mjs'
import { signIn } from './demo/api-client.mjs'
import { putChart } from './demo/put-chart.mjs'
import { markWhenReady, uploadClips } from './demo/put-clips.mjs'
import { CLINICS, PASSWORD } from './demo/scenario.mjs'

/** One seeding at a time, whoever starts it. */
const SEED_LOCK = 5_271_939

function setting(name, meaning) {
  const value = process.env[name]?.trim()
  if (!value) throw new StartError(`${name} is not set: ${meaning}`)
  return value
}

async function main() {
  if (process.env.STANDMARK_MODE !== 'demo') throw new StartError('demo data are for STANDMARK_MODE=demo only')
  const baseUrl = setting('STANDMARK_BASE_URL', 'the address of the running server').replace(/\/$/, '')
  const client = new pg.Client({ connectionString: setting('STANDMARK_OWNER_DATABASE_URL', 'the database with the role that owns it'), application_name: 'standmark-seed' })
  client.on('error', error => complain(`standmark: the database went away: ${error.message}`))
  await client.connect()
  try {
    await client.query('select pg_advisory_lock($1)', [SEED_LOCK])
    for (const clinic of CLINICS) {
      if (!await isSeeded(client, clinic)) await seedClinic(client, baseUrl, clinic)
    }
  } finally {
    await client.end()
  }
}

async function seedClinic(client, baseUrl, clinic) {
  const began = Date.now()
  const seconds = () => ((Date.now() - began) / 1000).toFixed(1)
  const place = await putClinic(client, clinic)
  const context = { ...place, ...await signInTherapists(baseUrl, clinic) }
  const waiting = []
  const charts = await Promise.all(clinic.patients.map(async (patient) => {
    const chart = await putChart(context, patient)
    waiting.push(...await uploadClips(context, chart))
    return chart
  }))
  if (clinic.patientAccount) await putPatientAccount(client, clinic, clinic.patientAccount, chartOf(clinic, charts, clinic.patientAccount.patient))
  say(`${clinic.name}: ${charts.length} charts, ${waiting.length} clips uploaded after ${seconds()} s`)
  await markWhenReady(waiting, left => left % 5 === 0 && say(`${clinic.name}: ${left} clips to go after ${seconds()} s`))
  await rememberSeeded(client, clinic)
  say(`${clinic.name}: ready after ${seconds()} s`)
}

async function signInTherapists(baseUrl, clinic) {
  const therapists = clinic.members.filter(member => member.roles.includes('therapist'))
  const signedIn = await Promise.all(therapists.map(async member => [member.key, await signIn(baseUrl, member.email, PASSWORD)]))
  return {
    api: Object.fromEntries(signedIn),
    members: Object.fromEntries(clinic.members.map(member => [member.key, fixedId(member.key)])),
  }
}

function chartOf(clinic, charts, key) {
  return charts[clinic.patients.findIndex(patient => patient.key === key)]
}

main().catch((error) => {
  complainAbout(error)
  process.exitCode = 1
})
