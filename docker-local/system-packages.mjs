import { spawnSync } from 'node:child_process'
import { existsSync, mkdtempSync, readdirSync, readFileSync, renameSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { cleanEnvironment, findProgram, run } from './commands.mjs'
import { StartError, complainAbout, say } from './console.mjs'
import { withLock } from './locks.mjs'

/**
 * What the system must have: Debian's package names, and how to see that they are there.
 * @typedef {{ what: string, packages: readonly string[], isThere: () => boolean }} Need
 */

/** @type {readonly Need[]} */
const NEEDS_TO_START = [
  { what: 'PostgreSQL', packages: ['postgresql'], isThere: () => postgresBinaries().length > 0 },
  { what: 'ffmpeg', packages: ['ffmpeg'], isThere: () => hasAll('ffmpeg', 'ffprobe') },
  {
    what: 'Swift, the object storage', packages: ['swift', 'swift-account', 'swift-container', 'swift-object', 'swift-proxy'],
    isThere: () => hasAll('swift-ring-builder', 'swift-proxy-server', 'swift-account-server', 'swift-container-server', 'swift-object-server'),
  },
  { what: 'a font for text in pictures', packages: ['fontconfig-config', 'fonts-dejavu-core'], isThere: () => existsSync('/etc/fonts/fonts.conf') && existsSync('/usr/share/fonts/truetype') },
]

/** @type {readonly Need[]} */
const NEEDS_TO_TEST = [
  { what: 'Chromium', packages: ['chromium'], isThere: () => hasAll('chromium') },
]

const POLICY = '/usr/sbin/policy-rc.d'
const POLICY_KEPT = '/usr/sbin/policy-rc.d.kept-by-standmark'
const POLICY_MARK = '# written by the Standmark launcher for the time of one package installation'

/**
 * Debian's PostgreSQL servers, the newest first; one on the PATH comes last.
 * @returns {string[]} folders that hold `initdb` and `postgres`
 */
export function postgresBinaries() {
  const root = '/usr/lib/postgresql'
  const versions = existsSync(root) ? readdirSync(root).filter(name => /^\d+$/.test(name)) : []
  const folders = versions.sort((a, b) => Number(b) - Number(a)).map(version => join(root, version, 'bin'))
  const onPath = findProgram('postgres')
  if (onPath) folders.push(join(onPath, '..'))
  return folders.filter(folder => existsSync(join(folder, 'initdb')) && existsSync(join(folder, 'postgres')))
}

/**
 * Installs what is missing, when we may.
 * @param {{ forTests: boolean }} options
 * @throws {StartError} with the command to give, when we may not
 */
export async function ensureSystemPackages({ forTests }) {
  const missing = missingNeeds(forTests)
  if (missing.length === 0) return
  const packages = missing.flatMap(need => need.packages)
  const command = `apt-get install --no-install-recommends ${packages.join(' ')}`
  const list = missing.map(need => need.what).join(', ')
  if (!findProgram('apt-get')) throw new StartError(`missing on this machine: ${list}. Please install it; on Debian: ${command}`)
  if (process.getuid?.() !== 0) {
    if (!maySudo()) throw new StartError(`missing on this machine: ${list}, and no right to install it. Please run once as root: ${command}`)
    say(`  installing with sudo: ${list}`)
    installThroughSudo(forTests)
    return
  }
  say(`  installing: ${list} (a few minutes on the first start)`)
  const log = join(mkdtempSync(join(tmpdir(), 'standmark-packages-')), 'apt.log')
  await withLock('/run/lock/standmark-packages', { onWait: () => say('  waiting for another start to finish its installation') }, async () => {
    if (missingNeeds(forTests).length > 0) await install(packages, log)
  })
  const still = missingNeeds(forTests)
  if (still.length > 0) throw new StartError(`installed, but still not found: ${still.map(need => need.what).join(', ')} (see ${log})`)
  rmSync(join(log, '..'), { recursive: true, force: true })
}

/** @param {boolean} forTests */
function missingNeeds(forTests) {
  return [...NEEDS_TO_START, ...(forTests ? NEEDS_TO_TEST : [])].filter(need => !need.isThere())
}

/** @param {readonly string[]} programs */
function hasAll(...programs) {
  return programs.every(program => findProgram(program) !== null)
}

function maySudo() {
  return findProgram('sudo') !== null && spawnSync('sudo', ['-n', 'true'], { stdio: 'ignore' }).status === 0
}

/** @param {boolean} forTests */
function installThroughSudo(forTests) {
  const self = fileURLToPath(import.meta.url)
  const done = spawnSync('sudo', ['-n', process.execPath, self, ...(forTests ? ['--for-tests'] : [])], { stdio: 'inherit' })
  if (done.status !== 0) throw new StartError('the installation with sudo failed')
}

/**
 * @param {readonly string[]} packages
 * @param {string} log
 */
async function install(packages, log) {
  const before = initScripts()
  forbidServices()
  try {
    // A stop lets dpkg finish: a half-configured package is worse than a minute's wait.
    const options = { log, env: { ...cleanEnvironment(), DEBIAN_FRONTEND: 'noninteractive' }, untouchable: true }
    const waitForOthers = ['-o', 'DPkg::Lock::Timeout=600', '-o', 'Acquire::Retries=3']
    await run('apt-get', [...waitForOthers, 'update'], { ...options, what: 'reading the package lists' })
    await run('apt-get', [...waitForOthers, 'install', '--yes', '--no-install-recommends', ...packages], { ...options, what: 'installing packages' })
    await keepOffAtBoot(before, log)
  } finally {
    allowServicesAgain()
  }
}

/** Debian starts a service right after its installation unless /usr/sbin/policy-rc.d answers 101: we run our own, with our own data. */
function forbidServices() {
  allowServicesAgain()
  if (existsSync(POLICY)) renameSync(POLICY, POLICY_KEPT)
  writeFileSync(POLICY, `#!/bin/sh\n${POLICY_MARK}\nexit 101\n`, { mode: 0o755 })
}

/** Puts back what stood there, also after an installation that was cut off. */
function allowServicesAgain() {
  if (existsSync(POLICY) && readFileSync(POLICY, 'utf8').includes(POLICY_MARK)) rmSync(POLICY)
  if (existsSync(POLICY_KEPT) && !existsSync(POLICY)) renameSync(POLICY_KEPT, POLICY)
}

function initScripts() {
  return new Set(existsSync('/etc/init.d') ? readdirSync('/etc/init.d') : [])
}

/**
 * Services that this installation brought must not start with the machine either.
 * @param {ReadonlySet<string>} before init scripts that were there already; they are somebody's, and stay as they are
 * @param {string} log
 */
async function keepOffAtBoot(before, log) {
  const brought = [...initScripts()].filter(name => !before.has(name) && /^(postgresql|swift-)/.test(name))
  if (!findProgram('update-rc.d')) return
  for (const name of brought) {
    await run('update-rc.d', [name, 'disable'], { log, what: `keeping the system's ${name} off`, untouchable: true })
  }
}

if (process.argv[1] === fileURLToPath(import.meta.url)) {
  ensureSystemPackages({ forTests: process.argv.includes('--for-tests') }).catch((error) => {
    complainAbout(error)
    process.exitCode = 1
  })
}
