import { createServer } from 'node:net'

/** Below the range from which Linux takes ports of outgoing connections (32768 up), so nobody slips in between choosing and listening. */
const LOWEST = 20_000
const HIGHEST = 32_000
const MAX_TRIES = 500

/**
 * Reads the port a person asked for.
 * @param {string | undefined} text the environment's PORT
 * @param {number} fallback
 * @returns {number | null} null when the text is no port number from 1 to 65535
 */
export function parsePort(text, fallback) {
  if (text === undefined || text.trim() === '') return fallback
  const port = Number(text)
  return Number.isInteger(port) && port >= 1 && port <= 65_535 ? port : null
}

/**
 * Whether a server could listen there now, on IPv4 and, where the machine has it, on IPv6:
 * `localhost` in a browser may mean either.
 * @param {number} port
 * @returns {Promise<boolean>}
 */
export async function isPortFree(port) {
  return await canListen(port, '127.0.0.1') && await canListen(port, '::1')
}

/**
 * Ports for the named services: the remembered one where it is free, else a free one at random.
 * @param {readonly string[]} names
 * @param {Readonly<Record<string, number>>} remembered
 * @returns {Promise<Record<string, number>>}
 */
export async function choosePorts(names, remembered) {
  /** @type {Record<string, number>} */
  const chosen = {}
  const taken = new Set()
  for (const name of names) {
    const port = await choosePort(remembered[name], taken)
    taken.add(port)
    chosen[name] = port
  }
  return chosen
}

/**
 * @param {number | undefined} wanted
 * @param {ReadonlySet<number>} taken
 */
async function choosePort(wanted, taken) {
  if (wanted !== undefined && Number.isInteger(wanted) && !taken.has(wanted) && await isPortFree(wanted)) return wanted
  for (let tries = 0; tries < MAX_TRIES; tries += 1) {
    const port = LOWEST + Math.floor(Math.random() * (HIGHEST - LOWEST))
    if (!taken.has(port) && await isPortFree(port)) return port
  }
  throw new Error(`no free port found between ${LOWEST} and ${HIGHEST}`)
}

/**
 * @param {number} port
 * @param {string} host
 * @returns {Promise<boolean>}
 */
function canListen(port, host) {
  return new Promise((resolve) => {
    const server = createServer()
    server.once('error', (error) => {
      // A machine without IPv6 cannot have anybody listening there.
      const hasNoSuchAddress = 'code' in error && (error.code === 'EADDRNOTAVAIL' || error.code === 'EAFNOSUPPORT')
      resolve(hasNoSuchAddress)
    })
    server.listen({ port, host, exclusive: true }, () => server.close(() => resolve(true)))
  })
}
