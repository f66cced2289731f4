import { spawn } from 'node:child_process'
import { mkdirSync } from 'node:fs'
import { dirname } from 'node:path'

/**
 * Locks between processes, held by the kernel through flock(1) of util-linux.
 *
 * The holder is `cat`, started under flock with a pipe from us: when this process ends, however it ends, the pipe
 * closes, `cat` ends and the kernel frees the lock. A dead holder can therefore never block the next start, and no
 * one has to judge whether a lock file is stale.
 * @typedef {{ release: () => Promise<void> }} Lock
 */

/** Exit code that tells "somebody else holds it" from a failure of the program. */
const TAKEN = 75

/**
 * @param {string} file created when missing; its content is never looked at
 * @param {{ shared?: boolean, waitSeconds?: number, onWait?: () => void }} [options]
 *   `shared`: readers beside each other; `waitSeconds`: 0 gives up at once, without it waits for ever;
 *   `onWait`: called once when the lock is not free at once
 * @returns {Promise<Lock | null>} null when the lock is taken and the wait is over
 */
export async function takeLock(file, options = {}) {
  mkdirSync(dirname(file), { recursive: true })
  const mode = options.shared ? '--shared' : '--exclusive'
  const atOnce = await hold([mode, '--nonblock', '--conflict-exit-code', String(TAKEN), file])
  if (atOnce || options.waitSeconds === 0) return atOnce
  options.onWait?.()
  const wait = options.waitSeconds === undefined ? [] : ['--timeout', String(options.waitSeconds), '--conflict-exit-code', String(TAKEN)]
  return hold([mode, ...wait, file])
}

/**
 * Runs `work` while holding the lock.
 * @template T
 * @param {string} file
 * @param {{ onWait?: () => void }} options
 * @param {() => Promise<T>} work
 * @returns {Promise<T>}
 */
export async function withLock(file, options, work) {
  const lock = await takeLock(file, options)
  if (!lock) throw new Error(`could not take the lock ${file}`)
  try {
    return await work()
  } finally {
    await lock.release()
  }
}

/**
 * @param {string[]} flockArguments
 * @returns {Promise<Lock | null>}
 */
function hold(flockArguments) {
  return new Promise((resolve, reject) => {
    // A group of its own: Ctrl-C in the terminal must not take the lock from us while we still stop.
    const child = spawn('flock', ['--no-fork', ...flockArguments, 'sh', '-c', 'echo held; exec cat >/dev/null'], {
      stdio: ['pipe', 'pipe', 'ignore'], detached: true,
    })
    const ended = new Promise(done => child.once('exit', code => done(code)))
    child.stdin.on('error', () => undefined)
    child.once('error', error => reject(new Error('the program flock (package util-linux) is needed', { cause: error })))
    child.stdout.once('data', () => {
      // Holding a lock must not keep this process alive; giving it back must be waited for.
      for (const handle of [child, child.stdin, child.stdout]) handle.unref()
      resolve({ release: async () => {
        child.ref()
        child.stdin.end()
        await ended
      } })
    })
    void ended.then((code) => {
      if (code === TAKEN) resolve(null)
      else reject(new Error(`flock ended with code ${code} for ${flockArguments.at(-1)}`))
    })
  })
}
