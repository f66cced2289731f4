/**
 * Finds places that say of themselves that they are not finished, and tests that are switched off.
 *
 *     node docker-local/unfinished.mjs
 */
import { existsSync, readFileSync, readdirSync, statSync } from 'node:fs'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { complain, say } from './console.mjs'
import { PROJECT } from './data-folder.mjs'

const PLACES = ['app', 'server', 'shared', 'tests', 'docker-local', 'drizzle.config.ts', 'nuxt.config.ts', 'README.md', 'DEVELOPERS.md']
const TEXTS = /\.(ts|mjs|js|vue|py|css|json|md|yaml|yml|sql)$/
/** These speak of the marks they look for. */
const SELF = /(^|\/)unfinished(\.spec)?\.(mjs|ts)$/

const MARKS = [
  { pattern: /\b(TODO|FIXME|XXX|HACK)\b/, what: 'a note to self' },
  { pattern: /\bnot (yet )?implemented\b/i, what: 'something not implemented' },
  { pattern: /\b(coming soon|lorem ipsum)\b/i, what: 'a filler' },
  { pattern: /\b(describe|it|test|bench)\.(only|skip|todo|fails)\b/, what: 'a test that is switched off, or switches others off' },
  { pattern: /^\s*debugger\b/, what: 'a halt for debugging' },
]

/**
 * @param {string} text the content of a file
 * @returns {{ line: number, what: string }[]} lines counted from 1
 */
export function findUnfinished(text) {
  return text.split('\n').flatMap((content, index) => {
    const mark = MARKS.find(({ pattern }) => pattern.test(content))
    return mark ? [{ line: index + 1, what: mark.what }] : []
  })
}

/**
 * @param {string} path
 * @returns {string[]}
 */
function listTexts(path) {
  const full = join(PROJECT, path)
  if (!existsSync(full)) return []
  if (statSync(full).isFile()) return TEXTS.test(path) && !SELF.test(path) ? [path] : []
  return readdirSync(full).filter(name => name !== 'node_modules' && !name.startsWith('.')).flatMap(name => listTexts(join(path, name)))
}

if (process.argv[1] === fileURLToPath(import.meta.url)) {
  const files = PLACES.flatMap(listTexts)
  const finds = files.flatMap(file => findUnfinished(readFileSync(join(PROJECT, file), 'utf8')).map(({ line, what }) => `${file}:${line}: ${what}`))
  for (const find of finds) complain(find)
  if (finds.length > 0) process.exitCode = 1
  else say(`nothing unfinished in ${files.length} files`)
}
