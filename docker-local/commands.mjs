import { spawn } from 'node:child_process'
import { accessSync, closeSync, constants } from 'node:fs'
import { delimiter, join } from 'node:path'
import { StartError } from './console.mjs'
import { lastLines, openLog } from './log-files.mjs'

/** Where Debian keeps programs; root's PATH from `su` may lack the sbin folders. */
const SYSTEM_PATHS = ['/usr/local/sbin', '/usr/local/bin', '/usr/sbin', '/usr/bin', '/sbin', '/bin']

/** @returns {string} the caller's PATH followed by Debian's own folders */
export function searchPath() {
  const own = (process.env.PATH ?? '').split(delimiter).filter(part => part !== '')
  return [...new Set([...own, ...SYSTEM_PATHS])].join(delimiter)
}

/**
 * @param {string} program a name without a slash
 * @returns {string | null} its full path, or null when it is not installed
 */
export function findProgram(program) {
  for (const folder of searchPath().split(delimiter)) {
    const path = join(folder, program)
    try {
      accessSync(path, constants.X_OK)
      return path
    } catch {
      continue
    }
  }
  return null
}

/**
 * The environment every child starts from. Settings of the caller's shell (NUXT_*, NITRO_*, PG*, S3 keys …) must not
 * reach the services: what they need is handed to them by name.
 * @param {Record<string, string>} [settings]
 * @returns {Record<string, string>}
 */
export function cleanEnvironment(settings = {}) {
  /** @type {Record<string, string>} */
  const environment = { PATH: searchPath(), LANG: 'C.UTF-8' }
  const kept = ['HOME', 'USER', 'LOGNAME', 'TMPDIR', 'TERM', 'TZ', 'CI', 'NO_COLOR', 'FORCE_COLOR',
    'HTTP_PROXY', 'HTTPS_PROXY', 'NO_PROXY', 'http_proxy', 'https_proxy', 'no_proxy', 'NODE_EXTRA_CA_CERTS', 'SSL_CERT_FILE']
  for (const name of kept) {
    const value = process.env[name]
    if (value !== undefined) environment[name] = value
  }
  return { ...environment, ...settings }
}

/**
 * Commands that are running now, so that a stop can end them.
 * @type {Set<import('node:child_process').ChildProcess>}
 */
const running = new Set()

/**
 * Commands that a stop waits for.
 * @type {Set<Promise<unknown>>}
 */
const untouchable = new Set()

let mayRun = true

/**
 * Ends every command that is running, lets none start any more, and waits for those that must not be cut off.
 * @returns {Promise<void>}
 */
export async function endCommands() {
  mayRun = false
  for (const child of running) endGroup(child.pid, 'SIGTERM')
  await Promise.allSettled(untouchable)
}

/**
 * @typedef {{
 *   log: string | null, fresh?: boolean, env?: Record<string, string>, cwd?: string, what: string, untouchable?: boolean, minutes?: number,
 * }} RunOptions
 * `log`: the file that takes the output, null to show it; `what`: said when it fails; `untouchable`: a stop lets it finish;
 * `minutes`: after which it is ended
 */

/**
 * Runs a program to its end.
 * @param {string} program
 * @param {readonly string[]} commandArguments
 * @param {RunOptions} options
 * @returns {Promise<void>}
 * @throws {StartError} when it ends with another code than 0, with the last lines of the log
 */
export async function run(program, commandArguments, options) {
  const code = await runForCode(program, commandArguments, options)
  if (code !== 0) {
    const how = typeof code === 'number' ? `code ${code}` : code
    throw new StartError(`${options.what} failed (${program} ended with ${how})`, { details: options.log === null ? '' : lastLines(options.log) })
  }
}

/**
 * Like `run`, but tells how the program ended instead of throwing.
 * @param {string} program
 * @param {readonly string[]} commandArguments
 * @param {RunOptions} options
 * @returns {Promise<number | string>} the exit code, or the name of the signal that ended it
 */
export async function runForCode(program, commandArguments, options) {
  if (!mayRun) throw new StartError('stopped while starting')
  const end = runToEnd(program, commandArguments, options)
  if (options.untouchable) {
    untouchable.add(end)
    void end.finally(() => untouchable.delete(end)).catch(() => undefined)
  }
  return end
}

/**
 * @param {string} program
 * @param {readonly string[]} commandArguments
 * @param {RunOptions} options
 * @returns {Promise<number | string>}
 */
function runToEnd(program, commandArguments, options) {
  return new Promise((resolve, reject) => {
    const log = options.log === null ? null : openLog(options.log, { fresh: options.fresh ?? false })
    const child = spawn(program, commandArguments, {
      cwd: options.cwd, env: options.env ?? cleanEnvironment(), detached: true, stdio: ['ignore', log ?? 'inherit', log ?? 'inherit'],
    })
    if (log !== null) closeSync(log)
    const limit = options.minutes === undefined ? undefined : setTimeout(() => endGroup(child.pid, 'SIGKILL'), options.minutes * 60_000)
    if (!options.untouchable) running.add(child)
    child.once('error', (error) => {
      running.delete(child)
      clearTimeout(limit)
      reject(new StartError(`${options.what} failed: ${error.message}`, { cause: error }))
    })
    child.once('close', (code, signal) => {
      running.delete(child)
      clearTimeout(limit)
      resolve(code ?? signal ?? 'an unknown end')
    })
  })
}

/**
 * Sends a signal to a process group led by a child of ours.
 * @param {number | undefined} pid of the leader
 * @param {NodeJS.Signals} signal
 */
export function endGroup(pid, signal) {
  if (pid === undefined) return
  try {
    process.kill(-pid, signal)
  } catch (error) {
    const isGone = error instanceof Error && 'code' in error && error.code === 'ESRCH'
    if (!isGone) throw error
  }
}
