/**
 * `npm test`: everything that guards the project, on throw-away data of its own.
 *
 *     npm test                          all
 *     npm test -- lint unit             some
 *     npm test -- unit api/patients     a project, or the files below a path in it
 *
 * Checks: lint, types, migrations, unfinished. Projects of vitest: unit, nuxt, api, e2e. The API and browser tests run
 * against the built server with a real database, object storage and mail; their addresses are in STANDMARK_TEST_*.
 * The last line is `N passed, N failed`.
 */
import { chmodSync, existsSync, mkdirSync, mkdtempSync, readFileSync, readdirSync, rmSync, statSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { ensureBuild, prepareTypes } from './build.mjs'
import { cleanEnvironment, findProgram, runForCode } from './commands.mjs'
import { StartError, complain, complainAbout, say } from './console.mjs'
import { PROJECT, openDataFolder } from './data-folder.mjs'
import { liveInForeground } from './foreground.mjs'
import { openInstance, testEnvironment, writeEnvironment } from './instance.mjs'
import { takeLock } from './locks.mjs'
import { ensureNpmPackages } from './npm-packages.mjs'
import { choosePorts } from './ports.mjs'
import { endOrphans } from './supervisor.mjs'
import { ensureSystemPackages } from './system-packages.mjs'
import { SERVED_PROJECTS, countReport, planTests, sumCounts, summarize } from './test-plan.mjs'

const DATA_PREFIX = 'standmark-test-'
/** A younger folder may belong to a run that is just about to lock it. */
const ABANDONED_AFTER_MS = 10 * 60 * 1000
const CHECK_MINUTES = 10
const PROJECT_MINUTES = 25

/** @type {Record<string, readonly string[]>} */
const CHECK_COMMANDS = {
  lint: ['node_modules/eslint/bin/eslint.js', '.', '--max-warnings', '0'],
  types: ['node_modules/vue-tsc/bin/vue-tsc.js', '-b', '--noEmit'],
  migrations: ['node_modules/drizzle-kit/bin.cjs', 'check'],
  unfinished: ['docker-local/unfinished.mjs'],
}

/** @param {Parameters<Parameters<typeof liveInForeground>[0]['begin']>[0]} life */
async function begin(life) {
  const plan = planTests(process.argv.slice(2))
  if ('unknown' in plan) throw new StartError(`there is no test called ${plan.unknown}; see the head of docker-local/test.mjs`)
  const needsServer = plan.projects.some(({ name }) => SERVED_PROJECTS.has(name))
  await removeAbandonedData()
  const data = mkdtempSync(join(tmpdir(), DATA_PREFIX))
  chmodSync(data, 0o711)
  const { web = 0 } = await choosePorts(['web'], {})
  const instance = await openInstance({ data, port: web })
  const whole = { supervisor: instance.supervisor, stop: async () => {
    await instance.stop()
    rmSync(data, { recursive: true, force: true })
  } }
  life.keep(whole)
  await ensureSystemPackages({ forTests: plan.projects.some(({ name }) => name === 'e2e') })
  await ensureNpmPackages()
  await prepareTypes()
  // The checks keep one core busy while the build keeps the other.
  const served = needsServer ? serve(instance).catch(error => error instanceof Error ? error : new Error(String(error))) : null
  const results = []
  for (const check of plan.checks) results.push(await runCheck(check, instance.folder.logs))
  const server = await served
  if (server instanceof Error) complainAbout(server)
  const env = server instanceof Error ? null : server
  for (const { name, filters } of plan.projects) {
    results.push(SERVED_PROJECTS.has(name) && env === null
      ? fail(name, 'the server it needs did not start')
      : await runProject({ name, filters, isWhole: plan.isWhole, folder: instance.folder.run, env: env ?? {} }))
  }
  await whole.stop()
  const counts = sumCounts(results)
  say(summarize(counts))
  return counts.failed === 0 ? 0 : 1
}

/**
 * @param {import('./instance.mjs').Instance} instance
 * @returns {Promise<Record<string, string>>} what the tests are told
 */
async function serve(instance) {
  const [build] = await Promise.all([ensureBuild(), instance.startServices().then(() => instance.migrate())])
  await instance.startServer(build)
  await instance.seed()
  writeEnvironment(instance)
  return { ...testEnvironment(instance), STANDMARK_TEST_BUILD: build, STANDMARK_TEST_CHROMIUM: findProgram('chromium') ?? '' }
}

/**
 * @param {string} name
 * @param {string} logs
 */
async function runCheck(name, logs) {
  const log = join(logs, `check-${name}.log`)
  const begun = Date.now()
  const code = await runForCode(process.execPath, CHECK_COMMANDS[name] ?? [], { log, fresh: true, cwd: PROJECT, what: name, minutes: CHECK_MINUTES })
  const seconds = ((Date.now() - begun) / 1000).toFixed(0)
  if (code === 0) {
    say(`ok      ${name} (${seconds} s)`)
    return { passed: 1, failed: 0, skipped: 0 }
  }
  complain(readFileSync(log, 'utf8').trimEnd())
  return fail(name, `ended with ${typeof code === 'number' ? `code ${code}` : code} after ${seconds} s`)
}

/** @param {{ name: string, filters: readonly string[], isWhole: boolean, folder: string, env: Record<string, string> }} options */
async function runProject({ name, filters, isWhole, folder, env }) {
  mkdirSync(folder, { recursive: true })
  const report = join(folder, `report-${name}.txt`)
  const code = await runForCode(process.execPath, [
    'node_modules/vitest/vitest.mjs', 'run', '--project', name, ...filters,
    '--reporter=default', '--reporter=json', `--outputFile.json=${report}`, ...(isWhole ? ['--passWithNoTests'] : []),
  ], { log: null, cwd: PROJECT, env: cleanEnvironment(env), what: name, minutes: PROJECT_MINUTES })
  const counts = countReport(existsSync(report) ? JSON.parse(readFileSync(report, 'utf8')) : null, { hasFailed: code !== 0 })
  if (isWhole && counts.passed + counts.failed === 0) return fail(name, 'there are no tests in it')
  say(`${counts.failed === 0 ? 'ok     ' : 'FAILED '} ${name}: ${summarize(counts)}`)
  return counts
}

/**
 * @param {string} name
 * @param {string} why
 */
function fail(name, why) {
  complain(`FAILED  ${name}: ${why}`)
  return { passed: 0, failed: 1, skipped: 0 }
}

/** Removes what test runs left that were cut off (kill -9): folders of ours that nobody holds. */
async function removeAbandonedData() {
  for (const name of readdirSync(tmpdir()).filter(entry => entry.startsWith(DATA_PREFIX))) {
    const path = join(tmpdir(), name)
    const facts = statSync(path, { throwIfNoEntry: false })
    if (!facts?.isDirectory() || facts.uid !== process.getuid?.() || Date.now() - facts.mtimeMs < ABANDONED_AFTER_MS) continue
    const folder = openDataFolder(path)
    const lock = await takeLock(folder.lockFile, { waitSeconds: 0 })
    if (!lock) continue
    await endOrphans(folder)
    rmSync(path, { recursive: true, force: true })
    await lock.release()
  }
}

liveInForeground({ begin })
