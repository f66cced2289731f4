/**
 * Brings the database to the state that this version of the server needs. A deploy step, run before the new server
 * starts; safe to run again and by two deploys at once.
 *
 *     STANDMARK_OWNER_DATABASE_URL=postgres://owner:…@host/standmark STANDMARK_APP_DATABASE_PASSWORD=… node docker-local/migrate.mjs
 *
 * STANDMARK_OWNER_DATABASE_URL: a role that owns the database and may create roles; the server never gets it.
 * STANDMARK_APP_DATABASE_PASSWORD: the password with which the server's role standmark_app shall sign in;
 * without it that role's password stays as it is.
 */
import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import { drizzle } from 'drizzle-orm/node-postgres'
import { migrate } from 'drizzle-orm/node-postgres/migrator'
import pg from 'pg'
import PgBoss from 'pg-boss'
import { StartError, complain, say } from './console.mjs'
import { PROJECT } from './data-folder.mjs'

const APP_ROLE = 'standmark_app'
const QUEUE_SCHEMA = 'pgboss'
/** pg-boss's own queue for scheduled jobs: its worker would create it, which the server's role may not. */
const SCHEDULER_QUEUE = { name: '__pgboss__send-it', options: {} }
/** Any number will do, as long as every migrate step uses the same. */
const DEPLOY_LOCK = 5_271_938

/** @param {string | undefined} ownerUrl */
async function main(ownerUrl) {
  if (!ownerUrl) throw new StartError('STANDMARK_OWNER_DATABASE_URL is not set: the address of the database with the role that owns it')
  const client = new pg.Client({ connectionString: ownerUrl, application_name: 'standmark-migrate' })
  client.on('error', error => complain(`standmark: the database went away: ${error.message}`))
  await client.connect()
  try {
    await client.query('select pg_advisory_lock($1)', [DEPLOY_LOCK])
    await client.query('set client_min_messages = warning')
    await migrate(drizzle(client), { migrationsFolder: join(PROJECT, 'drizzle') })
    await letAppSignIn(client, process.env.STANDMARK_APP_DATABASE_PASSWORD)
    await createQueues(ownerUrl)
    await grantQueues(client)
  } finally {
    await client.end()
  }
  say('the database is up to date')
}

/**
 * @param {pg.Client} client
 * @param {string | undefined} password
 */
async function letAppSignIn(client, password) {
  const existing = await client.query('select rolcanlogin from pg_roles where rolname = $1', [APP_ROLE])
  if (existing.rowCount === 0) await client.query(`create role ${APP_ROLE} nologin nosuperuser nocreatedb nocreaterole nobypassrls`)
  if (password) {
    await client.query(`alter role ${APP_ROLE} with login password ${client.escapeLiteral(password)}`)
  } else if (!existing.rows[0]?.rolcanlogin) {
    complain(`standmark: ${APP_ROLE} cannot sign in yet: set STANDMARK_APP_DATABASE_PASSWORD, or let an administrator of the database give it a password`)
  }
}

/**
 * Makes the job queues of queues.json, or brings their options up to date. Here and not in the server, because
 * pg-boss makes a table for each queue.
 * @param {string} ownerUrl
 */
async function createQueues(ownerUrl) {
  /** @type {{ name: string, options: PgBoss.Queue }[]} */
  const queues = JSON.parse(readFileSync(new URL('queues.json', import.meta.url), 'utf8'))
  const boss = new PgBoss({ connectionString: ownerUrl, schema: QUEUE_SCHEMA, supervise: false, schedule: false, migrate: true, max: 2 })
  /** @type {Error[]} */
  const failures = []
  boss.on('error', error => failures.push(error))
  await boss.start()
  try {
    // A queue's dead letters need their queue first, so those without a dead-letter queue come first.
    const inOrder = [SCHEDULER_QUEUE, ...queues].sort((a, b) => Number('deadLetter' in a.options) - Number('deadLetter' in b.options))
    for (const { name, options } of inOrder) {
      const asked = { ...options, name }
      await boss.createQueue(name, asked)
      await boss.updateQueue(name, asked)
    }
  } finally {
    await boss.stop({ graceful: false, wait: true })
  }
  if (failures[0]) throw failures[0]
}

/**
 * The server's role works with the queues' rows and cannot change their shape.
 * @param {pg.Client} client
 */
async function grantQueues(client) {
  await client.query(`
    revoke all on schema ${QUEUE_SCHEMA} from public;
    revoke execute on all functions in schema ${QUEUE_SCHEMA} from public;
    grant usage on schema ${QUEUE_SCHEMA} to ${APP_ROLE};
    grant select, insert, update, delete on all tables in schema ${QUEUE_SCHEMA} to ${APP_ROLE};
    grant usage on type ${QUEUE_SCHEMA}.job_state to ${APP_ROLE};
  `)
}

main(process.env.STANDMARK_OWNER_DATABASE_URL).catch((error) => {
  if (error instanceof StartError) complain(`standmark: ${error.message}`)
  else complain(`standmark: the database could not be brought up to date: ${describe(error)}`)
  process.exitCode = 1
})

/**
 * What PostgreSQL said, and not only drizzle's "Failed query".
 * @param {unknown} error
 * @returns {string}
 */
function describe(error) {
  if (!(error instanceof Error)) return String(error)
  if (error instanceof AggregateError && error.message === '') return error.errors.map(describe).join('; ')
  return error.cause ? `${error.message}\n  because: ${describe(error.cause)}` : error.message
}
