import { spawn, type ChildProcessByStdio } from 'node:child_process'
import { chown, mkdtemp, rm } from 'node:fs/promises'
import { join } from 'node:path'
import type { Readable } from 'node:stream'

/** What one run of a media tool may use. */
export interface MediaLimits { wallMs: number, cpuSeconds: number, outputBytes: number, memoryBytes: number }

/** Which walls this machine lets us put around a media tool; found once, at the first use. */
export interface Cage {
  /** `unshare` with a network namespace of its own: no network at all. */
  network: 'own' | 'own-as-user' | 'shared'
  /** The user the tool runs as when we are root. */
  user: { uid: number, gid: number } | null
  /** `setpriv --no-new-privs` and `prlimit` are there (util-linux). */
  isBounded: boolean
}

export interface MediaRun { program: string, args: readonly string[], folder: string, limits: MediaLimits, onLine?: (line: string) => void, signal?: AbortSignal }
export interface MediaResult { code: number, stdout: string, stderr: string }

/** The tool died by a signal or ran out of time, memory or space: trying the same again may help once, not for ever. */
export class MediaCrash extends Error {
  override name = 'MediaCrash'
}

/** Debian's `nobody`. */
const NOBODY = { uid: 65_534, gid: 65_534 }
const KEPT_OUTPUT = 16 * 1024 * 1024
const KEPT_COMPLAINTS = 16 * 1024
/** ffmpeg catches the signal of a spent processor limit and ends with this. */
const ENDED_BY_SIGNAL = 255

/** The words before the tool's own name. Pure. */
export function cageArguments(cage: Cage, limits: MediaLimits): string[] {
  if (!cage.isBounded) return []
  const network = { 'own': ['unshare', '-n', '--'], 'own-as-user': ['unshare', '-r', '-n', '--'], 'shared': [] }[cage.network]
  const user = cage.user ? [`--reuid=${cage.user.uid}`, `--regid=${cage.user.gid}`, '--clear-groups'] : []
  return [
    // pdeathsig: should this process be killed, its tools end with it.
    ...network, 'setpriv', '--no-new-privs', '--pdeathsig', 'KILL', ...user,
    'prlimit', `--as=${limits.memoryBytes}`, `--cpu=${limits.cpuSeconds}`, `--fsize=${limits.outputBytes}`, '--nofile=64', '--core=0', '--',
  ]
}

function endGroup(child: ChildProcessByStdio<null, Readable, Readable>): void {
  if (child.pid === undefined) return
  try {
    process.kill(-child.pid, 'SIGKILL')
  } catch {
    child.kill('SIGKILL')
  }
}

/** Calls `onLine` for each whole line. */
function eachLine(onLine: (line: string) => void): (text: string) => void {
  let rest = ''
  return (text) => {
    const lines = (rest + text).split('\n')
    rest = lines.pop() ?? ''
    for (const line of lines) onLine(line)
  }
}

/**
 * Runs a media tool in its cage: no shell, an empty environment, its own process group, killed whole at the time limit.
 * @throws MediaCrash when it died by a signal or ran too long; the abort reason when `signal` aborts
 */
export function runCaged(cage: Cage, run: MediaRun): Promise<MediaResult> {
  const [program = run.program, ...args] = [...cageArguments(cage, run.limits), run.program, ...run.args]
  return new Promise((resolve, reject) => {
    const child = spawn(program, args, { cwd: run.folder, env: { PATH: process.env.PATH ?? '/usr/bin:/bin', LC_ALL: 'C' }, stdio: ['ignore', 'pipe', 'pipe'], detached: true })
    let stdout = ''
    let stderr = ''
    let isLate = false
    const takeLines = run.onLine ? eachLine(run.onLine) : null
    const timer = setTimeout(() => {
      isLate = true
      endGroup(child)
    }, run.limits.wallMs)
    const onAbort = () => endGroup(child)
    run.signal?.addEventListener('abort', onAbort, { once: true })
    const settle = () => {
      clearTimeout(timer)
      run.signal?.removeEventListener('abort', onAbort)
    }
    child.stdout.setEncoding('utf8').on('data', (text: string) => {
      if (takeLines) takeLines(text)
      else if (stdout.length < KEPT_OUTPUT) stdout += text
    })
    child.stderr.setEncoding('utf8').on('data', (text: string) => {
      stderr = (stderr + text).slice(-KEPT_COMPLAINTS)
    })
    child.on('error', (error) => {
      settle()
      reject(error)
    })
    child.on('close', (code, endSignal) => {
      settle()
      if (run.signal?.aborted) reject(run.signal.reason)
      else if (isLate) reject(new MediaCrash(`${run.program} ran longer than ${run.limits.wallMs} ms`))
      else if (endSignal || code === null || code === ENDED_BY_SIGNAL) reject(new MediaCrash(`${run.program} was ended by ${endSignal ?? 'a signal'}`))
      else resolve({ code, stdout, stderr })
    })
  })
}

const PROBE_LIMITS: MediaLimits = { wallMs: 5_000, cpuSeconds: 5, outputBytes: 1_000_000, memoryBytes: 1_000_000_000 }

async function holds(cage: Cage, workDir: string): Promise<boolean> {
  const folder = await mkdtemp(join(workDir, 'cage-'))
  try {
    if (cage.user) await chown(folder, cage.user.uid, cage.user.gid)
    const result = await runCaged(cage, { program: 'touch', args: ['written'], folder, limits: PROBE_LIMITS })
    return result.code === 0
  } catch {
    // A wall that this machine does not offer: the next weaker one is tried.
    return false
  } finally {
    await rm(folder, { recursive: true, force: true })
  }
}

/** Finds the strongest cage that works on this machine, by trying them with a harmless program. */
export async function findCage(workDir: string): Promise<Cage> {
  const isRoot = process.getuid?.() === 0
  const users = isRoot ? [NOBODY, null] : [null]
  const networks = isRoot ? ['own', 'shared'] as const : ['own', 'own-as-user', 'shared'] as const
  for (const network of networks) {
    for (const user of users) {
      const cage: Cage = { network, user, isBounded: true }
      if (await holds(cage, workDir)) return cage
    }
  }
  return { network: 'shared', user: null, isBounded: false }
}
