import { spawn } from 'node:child_process'
import { closeSync, readdirSync, rmSync } from 'node:fs'
import { join } from 'node:path'
import { setTimeout as sleep } from 'node:timers/promises'
import { endGroup, findProgram } from './commands.mjs'
import { StartError, complain, say } from './console.mjs'
import { readJson, writeJson } from './data-folder.mjs'
import { boundLog, lastLines, logFile, openLog } from './log-files.mjs'
import { identify, isAlive, isProcessIdentity } from './process-identity.mjs'

/**
 * A process that must be there as long as the launcher is.
 * @typedef {{
 *   name: string,
 *   command: readonly string[],
 *   env: Record<string, string>,
 *   cwd: string,
 *   wave: number,
 *   check: () => Promise<boolean>,
 *   startSeconds: number,
 *   stopSignal?: NodeJS.Signals,
 *   stopSeconds?: number,
 *   isStarter?: boolean,
 * }} Service
 * `wave`: the highest wave is stopped first; `check`: whether it answers; `startSeconds`: how long its first answer may take.
 *
 * @typedef {{
 *   service: Service, child: import('node:child_process').ChildProcess | null, failure: string | null,
 *   isReady: boolean, restarts: number, startedAt: number, timer: NodeJS.Timeout | null, ended: Promise<void>,
 * }} Entry
 */

const CHECK_EVERY_MS = 150
/** What is slow to start is asked less often: each question may cost a line in its log. */
const SLOW_CHECK_EVERY_MS = 1000
const SLOW_AFTER_MS = 5000
const LOG_CHECK_EVERY_MS = 60_000
const SLOWEST_RESTART_MS = 30_000
/** After this long without a fall, a service counts as sound again. */
const SOUND_AFTER_MS = 60_000

/**
 * Starts, watches, restarts and stops the processes of one data folder.
 * @param {import('./data-folder.mjs').DataFolder} folder
 */
export function createSupervisor(folder) {
  /** @type {Entry[]} */
  const entries = []
  let isStopping = false
  const logTimer = setInterval(() => entries.forEach(entry => boundLog(logFile(folder.logs, entry.service.name))), LOG_CHECK_EVERY_MS)
  logTimer.unref()

  /** @param {Entry} entry */
  function launch(entry) {
    launchEntry(folder, entry, how => onEnd(entry, how))
  }

  /**
   * @param {Entry} entry
   * @param {string} how
   */
  function onEnd(entry, how) {
    const { service } = entry
    entry.child = null
    rmSync(recordFile(folder, service.name), { force: true })
    if (isStopping) return
    if (!entry.isReady) {
      entry.failure = how
      return
    }
    if (Date.now() - entry.startedAt > SOUND_AFTER_MS) entry.restarts = 0
    entry.restarts += 1
    const delay = Math.min(SLOWEST_RESTART_MS, 500 * 2 ** (entry.restarts - 1))
    complain(`standmark: ${service.name} ${how}; it is started again in ${delay / 1000} s (see ${logFile(folder.logs, service.name)})`)
    entry.timer = setTimeout(() => launch(entry), delay)
  }

  return {
    /**
     * @param {Service} service
     * @returns {Promise<void>} settled when the service answers
     * @throws {StartError} when it ends, or stays silent for `startSeconds`
     */
    async start(service) {
      /** @type {Entry} */
      const entry = { service, child: null, failure: null, isReady: false, restarts: 0, startedAt: 0, timer: null, ended: Promise.resolve() }
      if (isStopping) throw new StartError('stopped while starting')
      entries.push(entry)
      launch(entry)
      await waitUntilReady(entry, () => isStopping)
      if (entry.isReady) return
      if (isStopping) throw new StartError('stopped while starting')
      const how = entry.failure ?? `gave no answer within ${service.startSeconds} s`
      throw new StartError(`${service.name} did not start: it ${how}`, { details: lastLines(logFile(folder.logs, service.name)) })
    },

    /** Stops all services, the highest wave first; what does not end in its time is killed. */
    async stop() {
      isStopping = true
      clearInterval(logTimer)
      const waves = [...new Set(entries.map(entry => entry.service.wave))].sort((a, b) => b - a)
      for (const wave of waves) {
        await Promise.all(entries.filter(entry => entry.service.wave === wave).map(stopEntry))
      }
    },

    /** Kills all services at once: for a second, impatient Ctrl-C. */
    kill() {
      isStopping = true
      for (const entry of entries) if (entry.child) endGroup(entry.child.pid, 'SIGKILL')
    },
  }
}

/**
 * Starts the process of a service and keeps its record.
 * @param {import('./data-folder.mjs').DataFolder} folder
 * @param {Entry} entry
 * @param {(how: string) => void} onEnd
 */
function launchEntry(folder, entry, onEnd) {
  const { service } = entry
  const log = openLog(logFile(folder.logs, service.name), { fresh: entry.restarts === 0 })
  const [program, ...programArguments] = boundToUs(service)
  const child = spawn(program, programArguments, { cwd: service.cwd, env: service.env, detached: true, stdio: ['ignore', log, log] })
  closeSync(log)
  entry.child = child
  entry.startedAt = Date.now()
  if (child.pid !== undefined) record(folder, service, child.pid)
  entry.ended = new Promise((resolve) => {
    child.once('error', (error) => {
      onEnd(error.message)
      resolve()
    })
    child.once('exit', (code, signal) => {
      // What the process had started itself (an ffmpeg, say) has no master any more.
      endGroup(child.pid, 'SIGKILL')
      onEnd(signal ? `was ended by ${signal}` : `ended with code ${code}`)
      resolve()
    })
  })
}

/**
 * Asks a service until it answers, falls, its time is up or everything stops; sets `isReady` when it answered.
 * @param {Entry} entry
 * @param {() => boolean} isStopping
 */
async function waitUntilReady(entry, isStopping) {
  const deadline = Date.now() + entry.service.startSeconds * 1000
  while (!isStopping() && entry.failure === null && Date.now() < deadline) {
    if (await entry.service.check().catch(() => false)) {
      entry.isReady = entry.failure === null
      if (entry.isReady) return
    }
    await sleep(Date.now() - entry.startedAt > SLOW_AFTER_MS ? SLOW_CHECK_EVERY_MS : CHECK_EVERY_MS)
  }
}

/** @param {Entry} entry */
async function stopEntry(entry) {
  if (entry.timer) clearTimeout(entry.timer)
  const { child, service } = entry
  if (!child?.pid) return
  child.kill(service.stopSignal ?? 'SIGTERM')
  const patience = setTimeout(() => endGroup(child.pid, 'SIGKILL'), (service.stopSeconds ?? 8) * 1000)
  await entry.ended
  clearTimeout(patience)
}

/**
 * Asks the kernel to stop the process when the launcher dies, even by kill -9 (PR_SET_PDEATHSIG, prctl(2)).
 * @param {Service} service
 * @returns {readonly [string, ...string[]]}
 */
function boundToUs(service) {
  const [program, ...programArguments] = service.command
  if (!program) throw new Error(`${service.name} has no command`)
  if (findProgram('setpriv') === null) return [program, ...programArguments]
  const signal = (service.stopSignal ?? 'SIGTERM').replace(/^SIG/, '')
  // setpriv becomes the program: process id and start time stay. A command that changes its user comes with its own setpriv.
  return ['setpriv', '--pdeathsig', signal, ...(program === 'setpriv' ? programArguments : ['--', program, ...programArguments])]
}

/**
 * @param {import('./data-folder.mjs').DataFolder} folder
 * @param {string} name
 */
function recordFile(folder, name) {
  return join(folder.run, `${name}.json`)
}

/**
 * @param {import('./data-folder.mjs').DataFolder} folder
 * @param {Service} service
 * @param {number} pid
 */
function record(folder, service, pid) {
  const identity = identify(pid)
  if (identity) writeJson(recordFile(folder, service.name), { ...identity, wave: service.wave, stopSignal: service.stopSignal ?? 'SIGTERM', stopSeconds: service.stopSeconds ?? 8 })
}

/**
 * Ends what a run that was cut off (kill -9, power) left behind in this data folder: only processes whose id, start time
 * and boot are the recorded ones. Call it while holding the data folder's lock.
 * @param {import('./data-folder.mjs').DataFolder} folder
 */
export async function endOrphans(folder) {
  const records = readdirSync(folder.run).filter(name => name.endsWith('.json')).map(name => ({ name: name.slice(0, -'.json'.length), file: join(folder.run, name) }))
  const orphans = []
  for (const { name, file } of records) {
    const known = readRecord(file)
    if (known && isAlive(known)) orphans.push({ name, known, wave: Number(known.wave ?? 0) })
    else rmSync(file, { force: true })
  }
  for (const wave of [...new Set(orphans.map(orphan => orphan.wave))].sort((a, b) => b - a)) {
    await Promise.all(orphans.filter(orphan => orphan.wave === wave).map(async ({ name, known }) => {
      say(`  ending ${name} (process ${known.pid}), left over from a run that was cut off`)
      await endProcess(known, known.stopSignal === 'SIGINT' ? 'SIGINT' : 'SIGTERM', Number(known.stopSeconds ?? 8))
      rmSync(recordFile(folder, name), { force: true })
    }))
  }
}

/** @param {string} file */
function readRecord(file) {
  try {
    const known = readJson(file)
    return isProcessIdentity(known) ? /** @type {typeof known & Record<string, unknown>} */ (known) : null
  } catch (error) {
    // A record cut off by a power failure: no process of that time lives on.
    complain(`standmark: ${error instanceof Error ? error.message : error}; it is removed`)
    return null
  }
}

/**
 * @param {import('./process-identity.mjs').ProcessIdentity} known
 * @param {NodeJS.Signals} signal
 * @param {number} seconds patience before SIGKILL
 */
export async function endProcess(known, signal, seconds) {
  signalIfAlive(known, signal)
  const deadline = Date.now() + seconds * 1000
  while (isAlive(known) && Date.now() < deadline) await sleep(50)
  if (isAlive(known)) endGroup(known.pid, 'SIGKILL')
  const killDeadline = Date.now() + 5000
  while (isAlive(known) && Date.now() < killDeadline) await sleep(50)
  if (isAlive(known)) throw new StartError(`process ${known.pid}, left over from an earlier run, does not end`)
}

/**
 * @param {import('./process-identity.mjs').ProcessIdentity} known
 * @param {NodeJS.Signals} signal
 */
function signalIfAlive(known, signal) {
  if (!isAlive(known)) return
  try {
    process.kill(known.pid, signal)
  } catch (error) {
    const isGone = error instanceof Error && 'code' in error && error.code === 'ESRCH'
    if (!isGone) throw error
  }
}
