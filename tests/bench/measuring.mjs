/** Shared by the parts of the benchmark: interleaved rounds, medians, ratios. The machine is shared, so only ratios of one run say anything. */
import { fileURLToPath } from 'node:url'
import { createJiti } from 'jiti'

const at = path => fileURLToPath(new URL(`../../${path}`, import.meta.url))

/** Loads a TypeScript file of the project with its aliases. */
export const load = createJiti(import.meta.url, { alias: { '#shared': at('shared'), '#server': at('server'), '~': at('app') } })

export function median(values) {
  const sorted = [...values].sort((a, b) => a - b)
  const middle = Math.floor(sorted.length / 2)
  return sorted.length % 2 ? sorted[middle] : (sorted[middle - 1] + sorted[middle]) / 2
}

/**
 * Runs A and B in turn, `rounds` times after one warm-up of each.
 * @returns the medians, and the median, least and greatest of the ratios a / b
 */
export async function interleave(rounds, a, b) {
  await a()
  await b()
  const [as, bs] = [[], []]
  for (let round = 0; round < rounds; round += 1) {
    as.push(await a())
    bs.push(await b())
  }
  const ratios = as.map((value, index) => value / bs[index])
  return { a: median(as), b: median(bs), ratio: median(ratios), least: Math.min(...ratios), greatest: Math.max(...ratios) }
}

const lines = []

/** Prints a line of the result, and keeps it for the end. */
export function report(what, { ratio, least, greatest }, units, bar = '') {
  const line = `${what}: ${ratio.toPrecision(3)}x (${least.toPrecision(3)} to ${greatest.toPrecision(3)}); ${units}${bar && `; ${bar}`}`
  lines.push(line)
  console.log(line)
}

export function reportLines() {
  return lines
}
