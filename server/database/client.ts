import { drizzle, type NodePgDatabase } from 'drizzle-orm/node-postgres'
import { Pool, type PoolClient } from 'pg'

/** A connection inside a transaction that sees the rows of one clinic. */
export type Transaction = NodePgDatabase & { $client: PoolClient }

const UUID = /^[0-9a-f]{8}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{12}$/i

let pool: Pool | undefined

/**
 * Opens the pool of the serving role. Call once, at start.
 * @param onError told of connections that broke while idle or in use; without a listener they would end the process.
 */
export function openDatabase(url: string, onError: (error: Error) => void): void {
  pool = new Pool({
    connectionString: url,
    max: 10,
    connectionTimeoutMillis: 2_000,
    idleTimeoutMillis: 30_000,
    application_name: 'standmark',
    statement_timeout: 7_000,
    query_timeout: 7_500,
    idle_in_transaction_session_timeout: 5_000,
    keepAlive: true,
  })
  pool.on('error', onError)
  pool.on('connect', client => client.on('error', onError))
}

export async function closeDatabase(): Promise<void> {
  await pool?.end()
  pool = undefined
}

function openPool(): Pool {
  if (!pool) throw new Error('The database is not open')
  return pool
}

/** Whether the database did not even say that it gave up: the connection hangs. */
function isHung(error: unknown): boolean {
  return error instanceof Error && (error.message === 'Query read timeout' || isHung(error.cause))
}

async function runTransaction<Result>(begin: string, work: (tx: Transaction) => Promise<Result>): Promise<Result> {
  const client = await openPool().connect()
  let broken: Error | boolean | undefined
  try {
    // One round trip for both: every request pays it.
    await client.query(begin)
    const result = await work(drizzle(client, { casing: 'snake_case' }))
    await client.query('commit')
    return result
  } catch (error) {
    // On a connection that hangs the rollback would wait as long again; closing it rolls back too.
    if (isHung(error)) broken = true
    else await client.query('rollback').catch((failure: Error) => {
      broken = failure
    })
    throw error
  } finally {
    client.release(broken)
  }
}

/**
 * Runs `work` in a transaction that sees and writes the rows of one clinic only (row-level security).
 * The setting ends with the transaction, so nothing is left on the pooled connection.
 * Never await storage, mail or hashing inside: the connection is held.
 */
export function inClinic<Result>(clinicId: string, mode: 'read' | 'write', work: (tx: Transaction) => Promise<Result>): Promise<Result> {
  if (!UUID.test(clinicId)) throw new Error('Not a clinic id')
  return runTransaction(`begin${mode === 'read' ? ' read only' : ''}; select set_config('app.clinic_id', '${clinicId}', true)`, work)
}

/** A transaction without a clinic: tables show no rows; only the functions of `standmark_auth` answer. */
export function withoutClinic<Result>(work: (tx: Transaction) => Promise<Result>): Promise<Result> {
  return runTransaction('begin', work)
}

/** @returns whether the database answers. */
export async function isDatabaseUp(): Promise<boolean> {
  try {
    await openPool().query('select 1')
    return true
  } catch {
    return false
  }
}
