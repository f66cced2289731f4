import { createHash } from 'node:crypto'
import { existsSync, readFileSync, readdirSync, statSync } from 'node:fs'
import { join, posix } from 'node:path'

/** All that a build is made of. Tests, documents, migrations and the launcher itself do not go into it. */
const SOURCES = ['app', 'server', 'shared', 'public', 'nuxt.config.ts', 'tailwind.config.ts', 'tsconfig.json', 'package.json', 'package-lock.json']

/**
 * @param {string} project the project's folder
 * @param {readonly string[]} [sources] files and folders below it; what is absent counts as absent
 * @returns {string} 16 hexadecimal digits that change with every name and every byte
 */
export function hashSources(project, sources = SOURCES) {
  const hash = createHash('sha256')
  // Native modules and transpiled code differ between versions of Node.
  hash.update(`node ${process.versions.node.split('.')[0]} ${process.platform} ${process.arch}\n`)
  for (const file of sources.flatMap(source => listFiles(project, source)).sort()) {
    const content = createHash('sha256').update(readFileSync(join(project, file))).digest('hex')
    hash.update(`${content} ${file}\n`)
  }
  return hash.digest('hex').slice(0, 16)
}

/**
 * @param {string} project
 * @param {string} path
 * @returns {string[]} paths below the project, with `/`
 */
function listFiles(project, path) {
  const full = join(project, path)
  if (!existsSync(full)) return []
  if (statSync(full).isFile()) return [path]
  return readdirSync(full)
    .filter(name => name !== 'node_modules' && !name.startsWith('.'))
    .flatMap(name => listFiles(project, posix.join(path, name)))
}
