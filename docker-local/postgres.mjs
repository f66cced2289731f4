import { chownSync, existsSync, mkdirSync, readFileSync, readlinkSync, rmSync, statSync, writeFileSync } from 'node:fs'
import { connect } from 'node:net'
import { spawnSync } from 'node:child_process'
import { dirname, join } from 'node:path'
import { cleanEnvironment, run } from './commands.mjs'
import { StartError, say } from './console.mjs'
import { logFile } from './log-files.mjs'
import { identify } from './process-identity.mjs'
import { endProcess } from './supervisor.mjs'
import { postgresBinaries } from './system-packages.mjs'

export const DATABASE_ADMIN = 'postgres'
export const DATABASE_OWNER = 'standmark_owner'
export const DATABASE_APP = 'standmark_app'
export const DATABASE_NAME = 'standmark'

/**
 * Makes the cluster when it is not there yet, and describes its process.
 * PostgreSQL refuses to run as root: then it runs as Debian's user postgres.
 * @param {{ folder: import('./data-folder.mjs').DataFolder, secrets: import('./data-folder.mjs').Secrets, ports: Record<string, number> }} options
 * @returns {Promise<import('./supervisor.mjs').Service>}
 */
export async function preparePostgres({ folder, secrets, ports }) {
  const binaries = matchingBinaries(folder.postgres)
  const asUser = userPrefix(folder)
  if (!existsSync(join(folder.postgres, 'PG_VERSION'))) await createCluster(folder, secrets, binaries, asUser)
  await endForgottenServer(folder.postgres)
  const port = ports.database
  return {
    name: 'postgres',
    command: [...asUser, join(binaries, 'postgres'), '-D', folder.postgres, '-p', String(port),
      '-c', 'listen_addresses=127.0.0.1', '-c', 'unix_socket_directories=', '-c', 'logging_collector=off', '-c', 'log_destination=stderr',
      '-c', 'timezone=UTC', '-c', 'log_timezone=UTC', '-c', 'password_encryption=scram-sha-256', '-c', 'max_connections=100'],
    env: cleanEnvironment(),
    cwd: '/',
    wave: 0,
    check: () => acceptsConnections(Number(port)),
    // After a power failure the write-ahead log is replayed first.
    startSeconds: 120,
    // "Fast shutdown": open connections are ended, the data is written.
    stopSignal: 'SIGINT',
    stopSeconds: 20,
  }
}

/**
 * @param {string} data
 * @returns {string} the folder of the PostgreSQL programs that fit the cluster
 */
function matchingBinaries(data) {
  const all = postgresBinaries()
  const newest = all[0]
  if (!newest) throw new StartError('PostgreSQL is not installed')
  const versionFile = join(data, 'PG_VERSION')
  if (!existsSync(versionFile)) return newest
  const wanted = readFileSync(versionFile, 'utf8').trim()
  const fitting = all.find(folder => majorVersion(folder) === wanted)
  if (!fitting) throw new StartError(`the data in ${data} was made by PostgreSQL ${wanted}, which is not installed (apt-get install postgresql-${wanted})`)
  return fitting
}

/** @param {string} binaries */
function majorVersion(binaries) {
  return spawnSync(join(binaries, 'postgres'), ['--version'], { encoding: 'utf8' }).stdout.match(/\) (\d+)/)?.[1] ?? ''
}

/**
 * @param {import('./data-folder.mjs').DataFolder} folder
 * @param {import('./data-folder.mjs').Secrets} secrets
 * @param {string} binaries
 * @param {readonly string[]} asUser
 */
async function createCluster(folder, secrets, binaries, asUser) {
  say('  creating the database cluster')
  // What an interrupted creation left holds nothing yet: PG_VERSION is among the last that initdb writes.
  rmSync(folder.postgres, { recursive: true, force: true })
  mkdirSync(folder.postgres, { mode: 0o700 })
  // Not in run/: the database's user must be able to reach it.
  const passwordFile = join(folder.root, 'database-password')
  writeFileSync(passwordFile, `${secrets.databaseAdminPassword}\n`, { mode: 0o600 })
  try {
    const user = postgresUser()
    if (user) for (const path of [folder.postgres, passwordFile]) chownSync(path, user.uid, user.gid)
    const [program, ...programArguments] = [...asUser, join(binaries, 'initdb'), '-D', folder.postgres, '-U', DATABASE_ADMIN,
      '--encoding=UTF8', '--locale=C.UTF-8', '--auth=scram-sha-256', `--pwfile=${passwordFile}`, '--data-checksums']
    if (!program) throw new Error('no program to create the cluster with')
    await run(program, programArguments, {
      log: logFile(folder.logs, 'initdb'), fresh: true, cwd: '/', what: 'creating the database cluster',
    })
  } catch (error) {
    rmSync(folder.postgres, { recursive: true, force: true })
    throw error
  } finally {
    rmSync(passwordFile, { force: true })
  }
}

/** @returns {{ uid: number, gid: number } | null} Debian's user for PostgreSQL when we are root, else null */
function postgresUser() {
  if (process.getuid?.() !== 0) return null
  const entry = readFileSync('/etc/passwd', 'utf8').split('\n').map(line => line.split(':')).find(fields => fields[0] === 'postgres')
  if (!entry) throw new StartError('this machine has no user postgres; Debian\'s package postgresql makes it')
  return { uid: Number(entry[2]), gid: Number(entry[3]) }
}

/**
 * @param {import('./data-folder.mjs').DataFolder} folder
 * @returns {string[]} the command prefix that runs a program as the database's user; empty when we are that user
 */
function userPrefix(folder) {
  const user = postgresUser()
  if (!user) return []
  const prefix = ['setpriv', `--reuid=${user.uid}`, `--regid=${user.gid}`, '--clear-groups']
  // Under a closed folder such as /root the other user could not reach its own data: it keeps the one right to pass.
  const needsPassage = !isPassable(folder.root)
  return [...prefix, ...(needsPassage ? ['--inh-caps=+dac_override', '--ambient-caps=+dac_override'] : []), '--']
}

/**
 * @param {string} path
 * @returns {boolean} whether everybody may pass through this folder and all above it
 */
function isPassable(path) {
  for (let folder = path; ; folder = dirname(folder)) {
    if ((statSync(folder).mode & 0o001) === 0) return false
    if (dirname(folder) === folder) return true
  }
}

/**
 * Deals with a postmaster.pid that no record of ours explains: a server of this very folder is ended, a stale file removed.
 * (PostgreSQL itself would take any process with that id for its rival.)
 * @param {string} data
 */
async function endForgottenServer(data) {
  const pidFile = join(data, 'postmaster.pid')
  if (!existsSync(pidFile)) return
  const pid = Number(readFileSync(pidFile, 'utf8').split('\n')[0])
  const known = Number.isInteger(pid) && pid > 1 ? identify(pid) : null
  if (known && workingFolder(pid) === data) {
    say(`  ending the database server (process ${pid}), left over from a run that was cut off`)
    await endProcess(known, 'SIGINT', 20)
  }
  rmSync(pidFile, { force: true })
}

/** @param {number} pid */
function workingFolder(pid) {
  try {
    return readlinkSync(`/proc/${pid}/cwd`)
  } catch {
    return null
  }
}

/**
 * Speaks the first words of PostgreSQL's protocol (SSLRequest): a server that is up answers with one letter.
 * While it still replays its log it answers too; the log-in that follows (database-setup.mjs) waits for the end of that.
 * @param {number} port
 * @returns {Promise<boolean>}
 */
function acceptsConnections(port) {
  return new Promise((resolve) => {
    const socket = connect({ port, host: '127.0.0.1' })
    const finish = (/** @type {boolean} */ answer) => {
      socket.destroy()
      resolve(answer)
    }
    socket.setTimeout(2000, () => finish(false))
    socket.once('error', () => finish(false))
    socket.once('data', data => finish(data[0] === 0x4e || data[0] === 0x53))
    socket.once('connect', () => socket.write(Buffer.from([0, 0, 0, 8, 4, 210, 22, 47])))
  })
}
