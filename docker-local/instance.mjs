import { rmSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { cleanEnvironment, run } from './commands.mjs'
import { StartError, say } from './console.mjs'
import { databaseUrls, setUpDatabase } from './database-setup.mjs'
import { PROJECT, loadSecrets, openDataFolder, readJson, writeJson } from './data-folder.mjs'
import { logFile } from './log-files.mjs'
import { takeLock } from './locks.mjs'
import { MAIL_PORTS, describeMail } from './mail.mjs'
import { choosePorts, isPortFree } from './ports.mjs'
import { preparePostgres } from './postgres.mjs'
import { ensureBucket } from './storage-bucket.mjs'
import { createSupervisor, endOrphans } from './supervisor.mjs'
import { STORAGE_BUCKET, STORAGE_KEY, STORAGE_PORTS, STORAGE_REGION, isHealthy, prepareStorage } from './swift.mjs'

const SERVICE_PORTS = ['database', ...STORAGE_PORTS, ...MAIL_PORTS, 'worker']

/**
 * One data folder with its services: database, storage, mail, and on demand the server itself.
 * @typedef {Awaited<ReturnType<typeof openInstance>>} Instance
 */

/**
 * Takes hold of a data folder and ends what an earlier run, cut off, left behind in it.
 * @param {{ data?: string, port: number }} options `port`: where the server will listen
 * @throws {StartError} when the folder is in use, or the port is
 */
export async function openInstance({ data, port }) {
  const folder = openDataFolder(data)
  const lock = await takeLock(folder.lockFile, { waitSeconds: 3 })
  if (!lock) throw new StartError(`the data folder ${folder.root} is in use by another start of Standmark; stop that one, or name another STANDMARK_DATA folder`)
  const supervisor = createSupervisor(folder)
  try {
    await endOrphans(folder)
    forgetEnvironment(folder)
    if (!await isPortFree(port)) throw new StartError(`port ${port} is in use by another program; choose another, for example: PORT=${port + 1} npm start`)
    const secrets = loadSecrets(folder)
    const ports = await choosePorts(SERVICE_PORTS, rememberedPorts(folder))
    writeJson(folder.portsFile, ports)
    const origins = [`http://localhost:${port}`, `http://127.0.0.1:${port}`]
    const urls = databaseUrls(ports, secrets)
    const context = { folder, secrets, ports, port, origins, urls, supervisor, serverEnv: serverSettings({ folder, secrets, ports, origins, urls }) }
    return {
      ...context,
      startServices: () => startServices(context),
      migrate: () => migrate(context),
      /** @param {string} build */
      startServer: build => startServer(context, build),
      seed: () => seed(context),
      async stop() {
        await supervisor.stop()
        forgetEnvironment(folder)
        await lock.release()
      },
    }
  } catch (error) {
    await supervisor.stop()
    await lock.release()
    throw error
  }
}

/** @typedef {Pick<Instance, 'folder' | 'secrets' | 'ports' | 'port' | 'origins' | 'urls' | 'supervisor' | 'serverEnv'>} Context */

/** @param {import('./data-folder.mjs').DataFolder} folder */
function rememberedPorts(folder) {
  /** @type {Record<string, number>} */
  const remembered = {}
  for (const [name, port] of Object.entries(readJson(folder.portsFile) ?? {})) if (typeof port === 'number') remembered[name] = port
  return remembered
}

/**
 * The server's settings, all of them.
 * @param {{
 *   folder: import('./data-folder.mjs').DataFolder, secrets: import('./data-folder.mjs').Secrets, ports: Record<string, number>,
 *   origins: readonly string[], urls: { app: string },
 * }} parts
 * @returns {Record<string, string>}
 */
function serverSettings({ folder, secrets, ports, origins, urls }) {
  return {
    NODE_ENV: 'production',
    HOST: '127.0.0.1',
    // The pinned SDK runs on this Node; its notice about later versions would fill the logs.
    AWS_SDK_JS_NODE_VERSION_SUPPORT_WARNING_DISABLED: 'true',
    STANDMARK_MODE: 'demo',
    STANDMARK_ORIGINS: origins.join(','),
    STANDMARK_SECRET: secrets.sessionSecret,
    NUXT_SESSION_PASSWORD: secrets.sessionSecret,
    STANDMARK_DATABASE_URL: urls.app,
    STANDMARK_STORAGE_ENDPOINT: `http://127.0.0.1:${ports.storage}`,
    STANDMARK_STORAGE_PUBLIC_ENDPOINT: `http://127.0.0.1:${ports.storage}`,
    STANDMARK_STORAGE_REGION: STORAGE_REGION,
    STANDMARK_STORAGE_BUCKET: STORAGE_BUCKET,
    STANDMARK_STORAGE_KEY: STORAGE_KEY,
    STANDMARK_STORAGE_SECRET: secrets.storageSecret,
    STANDMARK_SMTP_URL: `smtp://127.0.0.1:${ports.mail}`,
    STANDMARK_MAIL_FROM: 'Standmark <no-reply@alderbay.example>',
    STANDMARK_WORK_DIR: folder.work,
  }
}

/** @param {Context} context */
async function startServices(context) {
  const { supervisor, folder } = context
  // What interrupted jobs left: each job works in a fresh folder below.
  rmSync(folder.work, { recursive: true, force: true })
  openDataFolder(folder.root)
  const [postgres, storage] = await Promise.all([preparePostgres(context), prepareStorage(context)])
  await Promise.all([postgres, ...storage, describeMail(context)].map(service => supervisor.start(service)))
  await Promise.all([setUpDatabase(context.urls, context.secrets), ensureBucket(context.serverEnv)])
}

/** @param {Context} context */
async function migrate({ folder, urls, secrets }) {
  await run(process.execPath, [join(PROJECT, 'docker-local/migrate.mjs')], {
    log: logFile(folder.logs, 'migrate'), fresh: true, cwd: PROJECT, what: 'bringing the database up to date',
    env: cleanEnvironment({ STANDMARK_OWNER_DATABASE_URL: urls.owner, STANDMARK_APP_DATABASE_PASSWORD: secrets.databaseAppPassword }),
  })
}

/**
 * Starts the worker and the web server from a build and waits until both are healthy.
 * @param {Context} context
 * @param {string} build
 */
async function startServer({ supervisor, folder, ports, port, serverEnv }, build) {
  const describe = (/** @type {'worker' | 'web'} */ role, /** @type {number} */ at) => ({
    name: role,
    command: [process.execPath, join(build, 'server/index.mjs')],
    env: cleanEnvironment({ ...serverEnv, STANDMARK_ROLE: role, PORT: String(at) }),
    cwd: folder.work,
    wave: 2,
    check: () => isHealthy(`http://127.0.0.1:${at}/api/health`),
    startSeconds: 90,
  })
  await Promise.all([supervisor.start(describe('worker', Number(ports.worker))), supervisor.start(describe('web', port))])
}

/** @param {Context} context */
async function seed({ folder, urls, port, serverEnv }) {
  if (readJson(folder.seededFile) !== null) return
  say('  seeding the demo clinic')
  await run(process.execPath, [join(PROJECT, 'docker-local/seed.mjs')], {
    log: logFile(folder.logs, 'seed'), fresh: true, cwd: PROJECT, what: 'seeding the demo clinic',
    env: cleanEnvironment({ ...serverEnv, STANDMARK_OWNER_DATABASE_URL: urls.owner, STANDMARK_BASE_URL: `http://127.0.0.1:${port}` }),
  })
  writeJson(folder.seededFile, { seededAt: new Date().toISOString() })
}

/**
 * Everything another program needs to use the running services, as environment variables in `<data>/env.json`
 * and, for `source`, in `<data>/env.sh`.
 * @param {Instance} instance
 */
export function writeEnvironment({ folder, urls, ports, port, serverEnv }) {
  const baseUrl = `http://127.0.0.1:${port}`
  const env = {
    ...serverEnv,
    STANDMARK_OWNER_DATABASE_URL: urls.owner,
    STANDMARK_BASE_URL: baseUrl,
    STANDMARK_DATA: folder.root,
    PORT: String(port),
    ...testEnvironment({ folder, urls, ports, port, serverEnv }),
  }
  writeJson(folder.envFile, env)
  const lines = Object.entries(env).map(([name, value]) => `export ${name}='${value.replaceAll('\'', '\'\\\'\'')}'`)
  writeFileSync(join(folder.root, 'env.sh'), `${lines.join('\n')}\n`, { mode: 0o600 })
}

/** @param {import('./data-folder.mjs').DataFolder} folder */
function forgetEnvironment(folder) {
  for (const file of [folder.envFile, join(folder.root, 'env.sh')]) rmSync(file, { force: true })
}

/**
 * What the API and browser tests are told about the instance they run against.
 * @param {Pick<Instance, 'folder' | 'urls' | 'ports' | 'port' | 'serverEnv'>} instance
 * @returns {Record<string, string>}
 */
export function testEnvironment({ folder, urls, ports, port, serverEnv }) {
  return {
    STANDMARK_TEST_BASE_URL: `http://127.0.0.1:${port}`,
    STANDMARK_TEST_OWNER_DATABASE_URL: urls.owner,
    STANDMARK_TEST_DATABASE_URL: urls.app,
    STANDMARK_TEST_STORAGE_ENDPOINT: `http://127.0.0.1:${ports.storage}`,
    STANDMARK_TEST_STORAGE_BUCKET: STORAGE_BUCKET,
    STANDMARK_TEST_STORAGE_KEY: STORAGE_KEY,
    STANDMARK_TEST_STORAGE_SECRET: serverEnv.STANDMARK_STORAGE_SECRET ?? '',
    STANDMARK_TEST_MAIL_API: `http://127.0.0.1:${ports.mailPage}/api/email`,
    STANDMARK_TEST_DATA: folder.root,
  }
}
