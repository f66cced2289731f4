/**
 * A stack to develop against: the services, and on demand the server, without the rest of `npm start`.
 *
 *     node docker-local/stack.mjs --data DIR --port N [options]
 *
 *     --services-only   database (migrated), object storage and mail; no build, no server
 *     --no-migrate      with --services-only: leave the database empty
 *     --build DIR       serve this build instead of building when needed
 *     --seed            seed the demo clinic
 *     --detach          return when ready; the stack goes on in the background
 *     --stop            stop the detached stack of this data folder
 *
 * When ready, DIR/env.json and DIR/env.sh hold every setting a program needs to use the stack; they are gone when it stops.
 */
import { spawn } from 'node:child_process'
import { closeSync, existsSync } from 'node:fs'
import { join, resolve } from 'node:path'
import { setTimeout as sleep } from 'node:timers/promises'
import { fileURLToPath } from 'node:url'
import { parseArgs } from 'node:util'
import { ensureBuild } from './build.mjs'
import { StartError, complainAbout, say } from './console.mjs'
import { openDataFolder, readJson, writeJson } from './data-folder.mjs'
import { liveInForeground } from './foreground.mjs'
import { openInstance, writeEnvironment } from './instance.mjs'
import { lastLines, logFile, openLog } from './log-files.mjs'
import { ensureNpmPackages } from './npm-packages.mjs'
import { parsePort } from './ports.mjs'
import { identify, isAlive, isProcessIdentity } from './process-identity.mjs'
import { endProcess } from './supervisor.mjs'
import { ensureSystemPackages } from './system-packages.mjs'

const DETACHED = 'STANDMARK_STACK_DETACHED'

const { values: options } = parseArgs({
  options: {
    'data': { type: 'string' }, 'port': { type: 'string' }, 'build': { type: 'string' },
    'services-only': { type: 'boolean' }, 'no-migrate': { type: 'boolean' }, 'seed': { type: 'boolean' },
    'detach': { type: 'boolean' }, 'stop': { type: 'boolean' },
  },
})

/** @param {Parameters<Parameters<typeof liveInForeground>[0]['begin']>[0]} life */
async function begin(life) {
  const port = parsePort(options.port, 3000)
  if (port === null) throw new StartError(`--port ${options.port} is no port number`)
  const instance = await openInstance({ data: resolve(options.data ?? '.data'), port })
  life.keep(instance)
  writeJson(launcherFile(instance.folder), identify(process.pid))
  await ensureSystemPackages({ forTests: false })
  await ensureNpmPackages()
  const building = options['services-only'] || options.build ? null : ensureBuild()
  await instance.startServices()
  if (!options['no-migrate']) await instance.migrate()
  if (!options['services-only']) await instance.startServer(options.build ? resolve(options.build) : (await building ?? ''))
  if (options.seed) await instance.seed()
  writeEnvironment(instance)
  say(`ready: ${instance.folder.envFile}`)
  return null
}

/** @param {import('./data-folder.mjs').DataFolder} folder */
function launcherFile(folder) {
  return join(folder.root, 'launcher.json')
}

/** Starts this very program in the background and returns when its stack is ready. */
async function detach() {
  const folder = openDataFolder(resolve(options.data ?? '.data'))
  const logPath = logFile(folder.logs, 'stack')
  const log = openLog(logPath, { fresh: true })
  const child = spawn(process.execPath, [fileURLToPath(import.meta.url), ...process.argv.slice(2).filter(argument => argument !== '--detach')], {
    detached: true, stdio: ['ignore', log, log], env: { ...process.env, [DETACHED]: '1' },
  })
  closeSync(log)
  let hasEnded = false
  child.once('exit', () => (hasEnded = true))
  // The environment of an earlier run, cut off, is removed by the new one before anything else.
  const isReady = () => existsSync(folder.envFile) && readJson(launcherFile(folder))?.pid === child.pid
  while (!isReady()) {
    if (hasEnded) throw new StartError('the stack did not start', { details: lastLines(logPath) })
    await sleep(200)
  }
  child.unref()
  say(`ready: source ${join(folder.root, 'env.sh')}`)
}

async function stopDetached() {
  const folder = openDataFolder(resolve(options.data ?? '.data'))
  const known = readJson(launcherFile(folder))
  if (isProcessIdentity(known) && isAlive(known)) await endProcess(known, 'SIGTERM', 60)
  say('stopped')
}

if (options.stop || options.detach) {
  (options.stop ? stopDetached() : detach()).catch((error) => {
    complainAbout(error)
    process.exitCode = 1
  })
} else {
  liveInForeground({ begin, hasParent: process.env[DETACHED] !== '1' })
}
