import { existsSync, mkdirSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import { cleanEnvironment, run } from './commands.mjs'
import { say } from './console.mjs'
import { PROJECT } from './data-folder.mjs'
import { withLock } from './locks.mjs'

/** Where installs and builds of this project keep their locks and logs. */
export const BUILDS = join(PROJECT, '.builds')

/**
 * Packages of a lock file: folder to what is known of it.
 * @typedef {Record<string, { version?: string, integrity?: string, optional?: boolean, devOptional?: boolean, inBundle?: boolean }>} LockedPackages
 */

/**
 * Runs `npm ci` when node_modules is missing or is not what package-lock.json says.
 * @returns {Promise<void>}
 */
export async function ensureNpmPackages() {
  if (isInstalled()) return
  mkdirSync(join(BUILDS, 'logs'), { recursive: true })
  await withLock(join(BUILDS, 'install.lock'), { onWait: () => say('  waiting for another start to finish npm ci') }, async () => {
    if (isInstalled()) return
    say('  npm ci')
    await run('npm', ['ci', '--no-audit', '--no-fund'], {
      log: join(BUILDS, 'logs', 'npm-ci.log'), fresh: true, cwd: PROJECT, env: cleanEnvironment(npmSettings()), what: 'npm ci',
    })
  })
}

/** @returns {Record<string, string>} how the person has set up npm: its registry, proxy, certificates */
function npmSettings() {
  /** @type {Record<string, string>} */
  const settings = {}
  for (const [name, value] of Object.entries(process.env)) if (/^npm_config_/i.test(name) && value !== undefined) settings[name] = value
  return settings
}

function isInstalled() {
  const wanted = lockedPackages(join(PROJECT, 'package-lock.json'))
  // npm writes this file last: it is missing while an install runs, and after one that was cut off.
  const installed = lockedPackages(join(PROJECT, 'node_modules', '.package-lock.json'))
  return wanted !== null && installed !== null && isUpToDate(wanted, installed)
}

/** @param {string} file */
function lockedPackages(file) {
  if (!existsSync(file)) return null
  /** @type {{ packages?: LockedPackages }} */
  const lock = JSON.parse(readFileSync(file, 'utf8'))
  return lock.packages ?? null
}

/**
 * @param {LockedPackages} wanted the packages of package-lock.json
 * @param {LockedPackages} installed the packages npm noted in node_modules
 * @returns {boolean} whether every package is there in its very version. Optional ones (binaries of other systems) may lack.
 */
export function isUpToDate(wanted, installed) {
  return Object.entries(wanted).every(([folder, entry]) => {
    if (folder === '') return true
    const there = installed[folder]
    if (!there) return Boolean(entry.optional || entry.devOptional || entry.inBundle)
    return there.version === entry.version && there.integrity === entry.integrity
  })
}
