import { readFileSync } from 'node:fs'

/**
 * A process id alone is no identity: ids are used again. Id, start time and the boot it belongs to are.
 * @typedef {{ pid: number, startTime: string, boot: string }} ProcessIdentity
 */

/**
 * Start time in clock ticks since boot: field 22 of /proc/<pid>/stat (proc(5)).
 * The second field, the program's name, may hold spaces and brackets, so fields are counted after its last bracket.
 * @param {string} stat the content of /proc/<pid>/stat
 * @returns {string}
 */
export function startTimeFromStat(stat) {
  const afterName = stat.slice(stat.lastIndexOf(')') + 2).split(' ')
  const startTime = afterName[19]
  if (!startTime || !/^\d+$/.test(startTime)) throw new Error(`no start time in: ${stat}`)
  return startTime
}

/** @returns {string} the kernel's id of the running boot */
export function currentBoot() {
  return readFileSync('/proc/sys/kernel/random/boot_id', 'utf8').trim()
}

/**
 * @param {number} pid
 * @returns {ProcessIdentity | null} null when there is no such process, or only its unreaped remains
 */
export function identify(pid) {
  try {
    const stat = readFileSync(`/proc/${pid}/stat`, 'utf8')
    const state = stat.slice(stat.lastIndexOf(')') + 2, stat.lastIndexOf(')') + 3)
    if (state === 'Z' || state === 'X') return null
    return { pid, startTime: startTimeFromStat(stat), boot: currentBoot() }
  } catch (error) {
    if (isGone(error)) return null
    throw error
  }
}

/**
 * @param {ProcessIdentity} known
 * @returns {boolean} whether that very process is alive
 */
export function isAlive(known) {
  const now = identify(known.pid)
  return now !== null && now.startTime === known.startTime && now.boot === known.boot
}

/**
 * @param {unknown} value anything, such as the parsed content of a pid file
 * @returns {value is ProcessIdentity}
 */
export function isProcessIdentity(value) {
  return typeof value === 'object' && value !== null
    && 'pid' in value && Number.isInteger(value.pid) && Number(value.pid) > 1
    && 'startTime' in value && typeof value.startTime === 'string'
    && 'boot' in value && typeof value.boot === 'string'
}

/** @param {unknown} error */
function isGone(error) {
  return error instanceof Error && 'code' in error && (error.code === 'ENOENT' || error.code === 'ESRCH')
}
