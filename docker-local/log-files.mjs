import { closeSync, copyFileSync, existsSync, openSync, readFileSync, statSync, truncateSync } from 'node:fs'
import { join } from 'node:path'

/** A log never grows past this; what was in it is kept once more as `<name>.log.1`. */
const MAX_LOG_BYTES = 16 * 1024 * 1024
const LINES_SHOWN = 25
const LINE_LENGTH_SHOWN = 400
const TEXT_LOOKED_AT = 64 * 1024

/**
 * @param {string} folder
 * @param {string} name of the service
 */
export function logFile(folder, name) {
  return join(folder, `${name}.log`)
}

/**
 * Opens a log for a child process. Opened for appending, so that cutting the file while the child writes is safe.
 * @param {string} file
 * @param {{ fresh: boolean }} options `fresh`: begin with an empty file
 * @returns {number} file descriptor; the caller closes it
 */
export function openLog(file, { fresh }) {
  if (fresh) closeSync(openSync(file, 'w', 0o600))
  return openSync(file, 'a', 0o600)
}

/** @param {string} file */
export function boundLog(file) {
  if (!existsSync(file) || statSync(file).size <= MAX_LOG_BYTES) return
  copyFileSync(file, `${file}.1`)
  truncateSync(file, 0)
}

/**
 * @param {string} file
 * @returns {string} its last lines, indented, under its name; empty when there is nothing to show
 */
export function lastLines(file) {
  if (!existsSync(file)) return ''
  const text = readFileSync(file, 'utf8').slice(-TEXT_LOOKED_AT).trimEnd()
  if (text === '') return ''
  const lines = text.split('\n').slice(-LINES_SHOWN).map(line => `    ${line.length > LINE_LENGTH_SHOWN ? `${line.slice(0, LINE_LENGTH_SHOWN)}…` : line}`)
  return [`  the last lines of ${file}:`, ...lines].join('\n')
}
