/**
 * What a run of the tests consists of, and how its results are counted. Pure; docker-local/test.mjs does the running.
 */

/** Checks that are no vitest projects; each counts as one test. */
export const CHECKS = /** @type {const} */ (['lint', 'types', 'migrations', 'unfinished'])

/** The projects of vitest.config.ts, in the order in which they run. */
export const PROJECTS = /** @type {const} */ (['unit', 'nuxt', 'api', 'e2e'])

/** Projects that need the running server. */
export const SERVED_PROJECTS = new Set(['api', 'e2e'])

/**
 * @typedef {{ isWhole: boolean, checks: string[], projects: { name: string, filters: string[] }[] }} Plan
 * @typedef {{ passed: number, failed: number, skipped: number }} Counts
 */

/**
 * Reads the selection of `npm test -- …`: names of checks and projects, a project optionally followed by a path below
 * its folder (`api/patients`). Nothing selects everything.
 * @param {readonly string[]} selection
 * @returns {Plan | { unknown: string }}
 */
export function planTests(selection) {
  if (selection.length === 0) return { isWhole: true, checks: [...CHECKS], projects: PROJECTS.map(name => ({ name, filters: [] })) }
  /** @type {Map<string, string[]>} */
  const filters = new Map()
  /** @type {string[]} */
  const checks = []
  for (const word of selection) {
    const [name = '', ...rest] = word.replace(/^tests\//, '').split('/')
    if (CHECKS.some(check => check === word)) checks.push(word)
    else if (PROJECTS.some(project => project === name)) filters.set(name, [...(filters.get(name) ?? []), ...(rest.join('/') ? [`tests/${name}/${rest.join('/')}`] : [''])])
    else return { unknown: word }
  }
  return {
    isWhole: false,
    checks: CHECKS.filter(check => checks.includes(check)),
    // A project named without a path means all of it, whatever else was named.
    projects: PROJECTS.filter(name => filters.has(name)).map(name => ({ name, filters: filters.get(name)?.includes('') ? [] : filters.get(name) ?? [] })),
  }
}

/**
 * Counts the single tests in a report of vitest's JSON reporter. A file that could not be run at all counts as one
 * failure, and so does a run that failed for another reason (an error outside every test).
 * @param {unknown} report
 * @param {{ hasFailed: boolean }} run `hasFailed`: whether vitest ended with another code than 0
 * @returns {Counts}
 */
export function countReport(report, { hasFailed }) {
  const files = isRecord(report) && Array.isArray(report.testResults) ? report.testResults : null
  if (files === null) return { passed: 0, failed: 1, skipped: 0 }
  const counts = sumCounts(files.map(countFile))
  if (hasFailed && counts.failed === 0) counts.failed = 1
  return counts
}

/**
 * @param {unknown} file one file's part of the report
 * @returns {Counts}
 */
function countFile(file) {
  if (!isRecord(file)) return { passed: 0, failed: 0, skipped: 0 }
  const states = (Array.isArray(file.assertionResults) ? file.assertionResults : []).map(test => isRecord(test) ? test.status : undefined)
  const passed = states.filter(state => state === 'passed').length
  const failed = states.filter(state => state === 'failed').length
  const couldNotRun = file.status === 'failed' && failed === 0
  return { passed, failed: couldNotRun ? 1 : failed, skipped: states.length - passed - failed }
}

/**
 * @param {readonly Counts[]} all
 * @returns {Counts}
 */
export function sumCounts(all) {
  return all.reduce((sum, counts) => ({ passed: sum.passed + counts.passed, failed: sum.failed + counts.failed, skipped: sum.skipped + counts.skipped }), { passed: 0, failed: 0, skipped: 0 })
}

/**
 * @param {Counts} counts
 * @returns {string} the last line of `npm test`
 */
export function summarize({ passed, failed, skipped }) {
  return `${passed} passed, ${failed} failed${skipped > 0 ? `, ${skipped} skipped` : ''}`
}

/**
 * @param {unknown} value
 * @returns {value is Record<string, unknown>}
 */
function isRecord(value) {
  return typeof value === 'object' && value !== null
}
