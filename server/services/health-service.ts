import { mailer } from '#server/adapters/mail'
import { settings } from '#server/adapters/settings'
import { storage } from '#server/adapters/storage'
import { isDatabaseUp, withoutClinic } from '#server/database/client'
import { areJobsTaken } from '#server/database/queries/health-queries'
import type { Health } from '#shared/schemas/health'

type Check = Health['checks']['database']

/** A job that nobody takes for this long says that no worker is there. */
const JOB_PATIENCE_SECONDS = 120
/** The answer is open to everybody: asking often must not become a load on what is asked. */
const KEPT_MS = 1_000

let kept: { at: number, answer: Promise<Health> } | undefined

const word = (isUp: boolean): Check => isUp ? 'up' : 'down'

async function checkMail(): Promise<Check> {
  const server = mailer()
  return server ? word(await server.isUp()) : 'not-configured'
}

async function checkQueue(): Promise<Check> {
  return withoutClinic(tx => areJobsTaken(tx, JOB_PATIENCE_SECONDS)).then(word, () => 'down')
}

async function askAll(): Promise<Health> {
  const [database, stored, queue, mail] = await Promise.all([isDatabaseUp().then(word), storage().isUp().then(word), checkQueue(), checkMail()])
  const isDown = database === 'down' || stored === 'down'
  const isDegraded = queue === 'down' || mail === 'down'
  return { status: isDown ? 'down' : isDegraded ? 'degraded' : 'ok', mode: settings().mode, checks: { database, storage: stored, queue, mail } }
}

/** Asks what the server stands on. `down` without database or storage; `degraded` when jobs or mail wait. Holds no secrets. */
export function readHealth(now: number = Date.now()): Promise<Health> {
  if (!kept || now - kept.at > KEPT_MS) kept = { at: now, answer: askAll() }
  return kept.answer
}
