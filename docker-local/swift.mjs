import { mkdirSync, rmSync } from 'node:fs'
import { userInfo } from 'node:os'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { cleanEnvironment, run } from './commands.mjs'
import { writeText } from './data-folder.mjs'
import { logFile } from './log-files.mjs'
import { swiftConfiguration } from './swift-config.mjs'

export const STORAGE_PORTS = ['storage', 'storageAccount', 'storageContainer', 'storageObject']
export const STORAGE_REGION = 'us-east-1'
export const STORAGE_BUCKET = 'standmark-clips'
const ACCOUNT = 'standmark'
const ACCOUNT_USER = 'app'
/** The S3 access key: Swift's form is account:user. */
export const STORAGE_KEY = `${ACCOUNT}:${ACCOUNT_USER}`

const KINDS = /** @type {const} */ (['account', 'container', 'object', 'proxy'])
const PYTHON = '/usr/bin/python3'

/**
 * Writes configuration and rings for this start, and describes the four processes of the object storage.
 * @param {{
 *   folder: import('./data-folder.mjs').DataFolder, secrets: import('./data-folder.mjs').Secrets,
 *   ports: Record<string, number>, origins: readonly string[], proxyHost?: string,
 * }} options `origins`: whose pages may upload (CORS); `proxyHost`: where S3 listens, 127.0.0.1 unless told
 * @returns {Promise<import('./supervisor.mjs').Service[]>}
 */
export async function prepareStorage({ folder, secrets, ports, origins, proxyHost = '127.0.0.1' }) {
  const configFolder = join(folder.storage, 'configuration')
  const devicesFolder = join(folder.storage, 'devices')
  rmSync(configFolder, { recursive: true, force: true })
  mkdirSync(configFolder, { recursive: true, mode: 0o700 })
  mkdirSync(join(devicesFolder, 'd1'), { recursive: true, mode: 0o700 })
  const swiftPorts = { proxy: portOf(ports, 'storage'), account: portOf(ports, 'storageAccount'), container: portOf(ports, 'storageContainer'), object: portOf(ports, 'storageObject') }
  const files = swiftConfiguration({
    configFolder, devicesFolder, user: userInfo().username, hashPrefix: secrets.storageHashPrefix, hashSuffix: secrets.storageHashSuffix,
    account: ACCOUNT, accountUser: ACCOUNT_USER, secret: secrets.storageSecret, proxyHost, origins, ports: swiftPorts,
  })
  for (const [name, text] of Object.entries(files)) writeText(join(configFolder, name), text)
  const rings = ['account', 'container', 'object'].map(kind => `${kind}=${portOf(swiftPorts, kind)}`)
  await run(PYTHON, [script('storage-rings.py'), configFolder, ...rings], { log: logFile(folder.logs, 'storage-rings'), fresh: true, what: 'laying out the object storage' })
  return KINDS.map(kind => ({
    name: `storage-${kind}`,
    command: [PYTHON, script('storage-server.py'), kind, join(configFolder, `${kind}-server.conf`)],
    env: cleanEnvironment({ PYTHONDONTWRITEBYTECODE: '1' }),
    cwd: folder.storage,
    wave: 1,
    check: () => isHealthy(`http://127.0.0.1:${swiftPorts[kind]}/healthcheck`),
    startSeconds: 60,
  }))
}

/**
 * @param {string} url
 * @returns {Promise<boolean>} whether it answers 200
 */
export async function isHealthy(url) {
  const answer = await fetch(url, { signal: AbortSignal.timeout(3000) })
  await answer.arrayBuffer()
  return answer.status === 200
}

/**
 * @param {Record<string, number>} ports
 * @param {string} name
 */
function portOf(ports, name) {
  const port = ports[name]
  if (port === undefined) throw new Error(`no port was chosen for ${name}`)
  return port
}

/** @param {string} name */
function script(name) {
  return fileURLToPath(new URL(name, import.meta.url))
}
