import { existsSync, mkdirSync, readFileSync, readdirSync, renameSync, rmSync, statSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { cleanEnvironment, run } from './commands.mjs'
import { StartError, complainAbout, say } from './console.mjs'
import { PROJECT } from './data-folder.mjs'
import { takeLock, withLock } from './locks.mjs'
import { BUILDS } from './npm-packages.mjs'
import { hashSources } from './source-hash.mjs'

const BUILD_LOCK = join(BUILDS, 'build.lock')
const NUXT = join(PROJECT, 'node_modules/nuxt/bin/nuxt.mjs')
const MARKER = 'complete.json'
/** A build younger than this may be about to be served by somebody who took no lock. */
const KEEP_MS = 60 * 60 * 1000

/**
 * The build of the sources as they are now, made when it is not there. It is guarded from deletion until this process ends.
 * @returns {Promise<string>} its folder, which holds `server/index.mjs`
 */
export async function ensureBuild() {
  mkdirSync(join(BUILDS, 'logs'), { recursive: true })
  return withLock(BUILD_LOCK, { onWait: sayWaiting }, async () => {
    const hash = hashSources(PROJECT)
    const existing = join(BUILDS, hash)
    const build = isComplete(existing) ? existing : await makeBuild(hash)
    // Shared: many may serve one build. The kernel frees it when this process ends, however it ends.
    const guard = await takeLock(guardFile(build), { shared: true, waitSeconds: 0 })
    if (!guard) throw new StartError(`the build ${build} is being deleted by somebody; please start again`)
    await deleteOldBuilds(build)
    return build
  })
}

/**
 * Writes Nuxt's types anew. Under the build lock, because the folder is empty for a moment and a build reads it.
 * @returns {Promise<void>}
 */
export async function prepareTypes() {
  mkdirSync(join(BUILDS, 'logs'), { recursive: true })
  await withLock(BUILD_LOCK, { onWait: sayWaiting }, runPrepare)
}

function sayWaiting() {
  say('  waiting for another build to finish')
}

function runPrepare() {
  return run(process.execPath, [NUXT, 'prepare'], { log: join(BUILDS, 'logs', 'prepare.log'), fresh: true, cwd: PROJECT, what: 'preparing Nuxt\'s types' })
}

/** @param {string} build */
function isComplete(build) {
  return existsSync(join(build, MARKER)) && existsSync(join(build, 'server/index.mjs'))
}

/** @param {string} build */
function guardFile(build) {
  return `${build}.served`
}

/**
 * @param {string} hash
 * @returns {Promise<string>}
 */
async function makeBuild(hash) {
  say('  building (about a minute)')
  const fresh = join(BUILDS, `${hash}.tmp`)
  rmSync(fresh, { recursive: true, force: true })
  const output = join(fresh, 'output')
  // tsconfig.json refers to files that Nuxt writes, and the build stops where one is missing, as in a fresh clone.
  if (!existsSync(join(PROJECT, '.nuxt/tsconfig.app.json'))) await runPrepare()
  await run(process.execPath, [NUXT, 'build'], {
    log: join(BUILDS, 'logs', 'build.log'), fresh: true, cwd: PROJECT, what: 'the build',
    env: cleanEnvironment({ NODE_ENV: 'production', STANDMARK_BUILD_DIR: join(fresh, 'nuxt'), STANDMARK_OUTPUT_DIR: output }),
  })
  if (!existsSync(join(output, 'server/index.mjs'))) throw new StartError(`the build left no server in ${output}`)
  // Sources that changed while they were read make a mixture: it may be served now, but never found again by their hash.
  const isPure = hashSources(PROJECT) === hash
  const build = join(BUILDS, isPure ? hash : `${hash}.mixed-${process.pid}-${Date.now()}`)
  writeFileSync(join(output, MARKER), `${JSON.stringify({ hash, isPure, builtAt: new Date().toISOString() })}\n`)
  rmSync(build, { recursive: true, force: true })
  renameSync(output, build)
  rmSync(fresh, { recursive: true, force: true })
  return build
}

/**
 * Deletes builds that nobody serves. Called under the build lock, so whatever is unfinished belongs to nobody.
 * @param {string} current
 */
async function deleteOldBuilds(current) {
  for (const name of readdirSync(BUILDS).filter(entry => /^[0-9a-f]{16}(\.tmp|\.mixed-[\d-]+)?$/.test(entry))) {
    const build = join(BUILDS, name)
    if (build === current) continue
    if (name.endsWith('.tmp')) {
      rmSync(build, { recursive: true, force: true })
      continue
    }
    if (Date.now() - statSync(build).mtimeMs < KEEP_MS || isMentionedByProcess(build)) continue
    const guard = await takeLock(guardFile(build), { waitSeconds: 0 })
    if (!guard) continue
    rmSync(build, { recursive: true, force: true })
    rmSync(guardFile(build), { force: true })
    await guard.release()
  }
}

/**
 * @param {string} build
 * @returns {boolean} whether a running process has the folder on its command line
 */
function isMentionedByProcess(build) {
  return readdirSync('/proc').filter(name => /^\d+$/.test(name)).some((pid) => {
    try {
      return readFileSync(`/proc/${pid}/cmdline`, 'utf8').includes(build)
    } catch {
      // It ended while we looked.
      return false
    }
  })
}

if (process.argv[1] === fileURLToPath(import.meta.url)) {
  ensureBuild().then(say, (error) => {
    complainAbout(error)
    process.exitCode = 1
  })
}
