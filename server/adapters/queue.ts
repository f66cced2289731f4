import { Pool } from 'pg'
import PgBoss from 'pg-boss'
import { settings } from './settings'

/** A connection inside the caller's transaction. */
export interface QueryClient { query: (text: string, values: unknown[]) => Promise<{ rows: unknown[] }> }

export interface WorkOptions {
  /** How many jobs of this name run at once in this process. */
  concurrency: number
  pollSeconds: number
  /** What the job came with; it was checked by nobody. `signal` aborts when the process is asked to stop. */
  run: (payload: unknown, signal: AbortSignal) => Promise<unknown>
}

const POOL_SIZE = 4
const STATEMENT_MS = 10_000
const MAINTENANCE_SECONDS = 60

function openPool(url: string, onError: (error: Error) => void): Pool {
  const pool = new Pool({ connectionString: url, max: POOL_SIZE, application_name: 'standmark-queue', statement_timeout: STATEMENT_MS, connectionTimeoutMillis: 3_000, keepAlive: true })
  pool.on('error', onError)
  // Without a listener of its own a connection that breaks while in use would end the process.
  pool.on('connect', client => client.on('error', onError))
  return pool
}

/** Sends jobs. The queues were made by the deploy step; this role only works with their rows. */
export function createSender() {
  // Never started: it needs no connection, jobs are sent over the caller's.
  const boss = new PgBoss({ db: { executeSql: () => Promise.reject(new Error('A job is sent inside a transaction')) }, migrate: false, supervise: false, schedule: false })
  return {
    /** Queues a job in the caller's transaction: it exists when that one commits, and not before. @returns its id, or null when the queue holds its like already */
    send(client: QueryClient, name: string, payload: object): Promise<string | null> {
      return boss.send(name, payload, { db: { executeSql: (text, values) => client.query(text, values) } })
    },
  }
}

/** Takes jobs. Start once in a worker's process. */
export async function startWorker(url: string, jobs: Readonly<Record<string, WorkOptions>>, onError: (error: Error) => void) {
  const pool = openPool(url, onError)
  const boss = new PgBoss({ db: { executeSql: (text, values) => pool.query(text, values) }, migrate: false, schedule: false, supervise: true, maintenanceIntervalSeconds: MAINTENANCE_SECONDS })
  const stopping = new AbortController()
  boss.on('error', onError)
  await boss.start()
  for (const [name, { concurrency, pollSeconds, run }] of Object.entries(jobs)) {
    for (let lane = 0; lane < concurrency; lane += 1) {
      await boss.work(name, { batchSize: 1, pollingIntervalSeconds: pollSeconds }, async ([job]) => job ? run(job.data, stopping.signal) : undefined)
    }
  }
  return {
    /** Queues a job outside any transaction. */
    send: (name: string, payload: object): Promise<string | null> => boss.send(name, payload),
    /** Asks running jobs to give up (they are taken again later), waits for them, and closes. */
    async stop(graceMs: number): Promise<void> {
      stopping.abort(new Error('the process stops'))
      await boss.stop({ graceful: true, wait: true, timeout: graceMs })
      await pool.end()
    },
  }
}
export type QueueWorker = Awaited<ReturnType<typeof startWorker>>

/** Starts taking jobs from the database that the settings name. */
export function startConfiguredWorker(jobs: Readonly<Record<string, WorkOptions>>, onError: (error: Error) => void): Promise<QueueWorker> {
  return startWorker(settings().databaseUrl, jobs, onError)
}

let sender: ReturnType<typeof createSender> | undefined

/** Queues a job in the caller's transaction. */
export function sendJob(client: QueryClient, name: string, payload: object): Promise<string | null> {
  sender ??= createSender()
  return sender.send(client, name, payload)
}
