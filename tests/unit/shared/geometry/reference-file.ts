import { readFileSync } from 'node:fs'

/** A fixture of `tests/reference`, read as the type that the caller states. */
export function referenceFile<T>(name: string): T {
  const content: T = JSON.parse(readFileSync(new URL(`../../../reference/${name}`, import.meta.url), 'utf8'))
  return content
}
