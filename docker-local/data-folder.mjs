import { randomBytes } from 'node:crypto'
import { chmodSync, closeSync, existsSync, mkdirSync, openSync, readFileSync, renameSync, writeFileSync, writeSync, fsyncSync } from 'node:fs'
import { join, resolve } from 'node:path'
import { fileURLToPath } from 'node:url'
import { StartError } from './console.mjs'

/** The project's own folder. */
export const PROJECT = fileURLToPath(new URL('..', import.meta.url)).replace(/\/$/, '')

/**
 * Where one instance keeps all that is its own.
 * @typedef {{
 *   root: string, postgres: string, storage: string, mail: string, work: string, logs: string, run: string,
 *   secretsFile: string, portsFile: string, envFile: string, seededFile: string, lockFile: string,
 * }} DataFolder
 */

/**
 * Secrets of one data folder, made at random when it is created. The stored objects can only be found again
 * with the same `storageHashPrefix` and `storageHashSuffix`.
 * @typedef {{
 *   sessionSecret: string, databaseAdminPassword: string, databaseOwnerPassword: string, databaseAppPassword: string,
 *   storageSecret: string, storageHashPrefix: string, storageHashSuffix: string,
 * }} Secrets
 */

/** @type {readonly (keyof Secrets)[]} */
const SECRET_NAMES = [
  'sessionSecret', 'databaseAdminPassword', 'databaseOwnerPassword', 'databaseAppPassword',
  'storageSecret', 'storageHashPrefix', 'storageHashSuffix',
]

/**
 * Names the places inside a data folder and creates what is missing.
 * @param {string | undefined} path absolute, or relative to the project; default `.data`
 * @returns {DataFolder}
 */
export function openDataFolder(path) {
  const root = resolve(PROJECT, path && path.trim() !== '' ? path : '.data')
  const folder = {
    root,
    postgres: join(root, 'postgres'), storage: join(root, 'storage'), mail: join(root, 'mail'),
    work: join(root, 'work'), logs: join(root, 'logs'), run: join(root, 'run'),
    secretsFile: join(root, 'secrets.json'), portsFile: join(root, 'ports.json'), envFile: join(root, 'env.json'),
    seededFile: join(root, 'seeded.json'), lockFile: join(root, 'run', 'lock'),
  }
  try {
    // 0711: the database runs as another user when we are root, and must be able to pass through.
    if (!existsSync(root)) mkdirSync(root, { recursive: true, mode: 0o711 })
    for (const part of [folder.storage, folder.mail, folder.work, folder.logs, folder.run]) mkdirSync(part, { recursive: true, mode: 0o700 })
  } catch (error) {
    throw new StartError(`the data folder ${root} cannot be used: ${error instanceof Error ? error.message : error}`, { cause: error })
  }
  return folder
}

/**
 * @param {DataFolder} folder
 * @returns {Secrets}
 */
export function loadSecrets(folder) {
  const stored = readJson(folder.secretsFile)
  if (stored === null && existsSync(join(folder.postgres, 'PG_VERSION'))) {
    throw new StartError(`${folder.secretsFile} is missing, and without it the data beside it cannot be opened. Put it back, or name another STANDMARK_DATA folder.`)
  }
  const known = stored ?? {}
  /** @type {Record<string, string>} */
  const secrets = {}
  for (const name of SECRET_NAMES) {
    const value = known[name]
    secrets[name] = typeof value === 'string' ? value : randomBytes(32).toString('hex')
  }
  writeJson(folder.secretsFile, secrets)
  return /** @type {Secrets} */ (secrets)
}

/**
 * @param {string} file
 * @returns {Record<string, unknown> | null} null when there is no such file
 */
export function readJson(file) {
  if (!existsSync(file)) return null
  try {
    const value = JSON.parse(readFileSync(file, 'utf8'))
    if (typeof value === 'object' && value !== null && !Array.isArray(value)) return value
  } catch (error) {
    throw new StartError(`${file} is damaged: ${error instanceof Error ? error.message : error}`, { cause: error })
  }
  throw new StartError(`${file} is damaged: it holds no object`)
}

/**
 * Writes the whole file or nothing, readable by its owner alone.
 * @param {string} file
 * @param {unknown} value
 */
export function writeJson(file, value) {
  const fresh = `${file}.new`
  const handle = openSync(fresh, 'w', 0o600)
  try {
    writeSync(handle, `${JSON.stringify(value, null, 2)}\n`)
    fsyncSync(handle)
  } finally {
    closeSync(handle)
  }
  chmodSync(fresh, 0o600)
  renameSync(fresh, file)
}

/**
 * @param {string} file
 * @param {string} text
 */
export function writeText(file, text) {
  writeFileSync(file, text, { mode: 0o600 })
}
