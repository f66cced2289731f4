/**
 * `npm start`: Standmark with its demo clinic on this machine, from nothing but Node.
 *
 *     PORT             where to serve, default 3000
 *     STANDMARK_DATA   the data folder, default .data in the project
 *
 * Stays in the foreground. Ctrl-C or SIGTERM stops all it started, and nothing else.
 */
import { ensureBuild } from './build.mjs'
import { StartError, say } from './console.mjs'
import { liveInForeground } from './foreground.mjs'
import { openInstance } from './instance.mjs'
import { ensureNpmPackages } from './npm-packages.mjs'
import { parsePort } from './ports.mjs'
import { ensureSystemPackages } from './system-packages.mjs'

const DEFAULT_PORT = 3000
const OLDEST_NODE = [20, 19]

const DEMO_PASSWORD = 'stand-tall-together'
const DEMO_SIGN_INS = [
  ['therapist@alderbay.example', 'a therapist'],
  ['therapist2@alderbay.example', 'a colleague'],
  ['student@alderbay.example', 'a student'],
  ['patient@alderbay.example', 'a patient'],
  ['admin@alderbay.example', 'the administrator'],
  ['therapist@otherclinic.example', 'a therapist of a second clinic, to see that nothing crosses'],
]

/** @param {Parameters<Parameters<typeof liveInForeground>[0]['begin']>[0]} life */
async function begin(life) {
  refuseOldNode()
  const port = parsePort(process.env.PORT, DEFAULT_PORT)
  if (port === null) throw new StartError(`PORT is ${process.env.PORT}, which is no port number (1 to 65535)`)
  const instance = await openInstance({ data: process.env.STANDMARK_DATA, port })
  life.keep(instance)
  say('Standmark is starting')
  await ensureSystemPackages({ forTests: false })
  await ensureNpmPackages()
  say('  starting database, object storage and mail')
  const [build] = await Promise.all([ensureBuild(), instance.startServices().then(() => instance.migrate())])
  say('  starting the server')
  await instance.startServer(build)
  await instance.seed()
  greet(instance)
  return null
}

function refuseOldNode() {
  const [major = 0, minor = 0] = process.versions.node.split('.').map(Number)
  const [oldestMajor = 0, oldestMinor = 0] = OLDEST_NODE
  if (major > oldestMajor || (major === oldestMajor && minor >= oldestMinor)) return
  throw new StartError(`Node ${process.versions.node} is too old: ${OLDEST_NODE.join('.')} or newer is needed`)
}

/** @param {import('./instance.mjs').Instance} instance */
function greet({ port, folder, ports }) {
  const width = Math.max(...DEMO_SIGN_INS.map(([email = '']) => email.length))
  say(`Standmark is ready at http://localhost:${port}`)
  say(`  Demo sign-ins, all with the password ${DEMO_PASSWORD}:`)
  for (const [email = '', who = ''] of DEMO_SIGN_INS) say(`    ${email.padEnd(width)}  ${who}`)
  say(`  Mail that Standmark sends is shown at http://localhost:${ports.mailPage} and goes nowhere else.`)
  say(`  Data and logs: ${folder.root}. Invented people only: this is no place for real patients. Ctrl-C stops it.`)
}

liveInForeground({ begin })
