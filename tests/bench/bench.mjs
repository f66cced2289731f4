/**
 * `npm run bench`: figures as ratios of one run, on a stack of its own in a temporary folder.
 *
 *     npm run bench                      all parts
 *     npm run bench -- geometry requests some of: geometry, requests, frames, review, upload
 */
import { spawnSync } from 'node:child_process'
import { mkdtempSync, readFileSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { chromium } from 'playwright-core'
import { signIn } from '../../docker-local/demo/api-client.mjs'
import { choosePorts } from '../../docker-local/ports.mjs'
import { benchFrames } from './frames.mjs'
import { benchGeometry } from './geometry.mjs'
import { reportLines } from './measuring.mjs'
import { benchRequests } from './requests.mjs'
import { benchReviewCopy } from './review-copy.mjs'
import { benchUpload, uploadWhole } from './upload.mjs'

const THERAPIST = ['therapist@alderbay.example', 'stand-tall-together']
const FLAGS = ['--no-sandbox', '--disable-gpu', '--disable-quic', '--no-first-run', '--disable-background-networking', '--disable-component-update', '--disable-sync']
const asked = process.argv.slice(2)
const isAsked = part => asked.length === 0 || asked.includes(part)

function stack(data, port, ...options) {
  const { status } = spawnSync(process.execPath, ['docker-local/stack.mjs', '--data', data, '--port', String(port), ...options], { stdio: 'inherit' })
  if (status !== 0) throw new Error('the stack did not start')
}

/** A session to send clips to, and a clip to step through, of the demo clinic's first patient with clips. */
async function findPlace(client) {
  const { items: patients } = await client.get('/api/patients?search=Ferreyra')
  const patientId = patients[0].id
  const { items: clips } = await client.get(`/api/patients/${patientId}/clips`)
  const clip = clips.find(one => one.status === 'ready' && one.frameCount > 60)
  const session = await client.post(`/api/patients/${patientId}/sessions`, { startedAt: new Date().toISOString() })
  const { timesUs } = await client.get(`/api/clips/${clip.id}/frames`)
  return { patientId, sessionId: session.id, clipId: clip.id, timesUs }
}

async function benchServer(data, port) {
  const env = JSON.parse(readFileSync(join(data, 'env.json'), 'utf8'))
  const baseUrl = `http://localhost:${port}`
  const client = await signIn(baseUrl, ...THERAPIST)
  const me = await client.get('/api/me')
  const place = { ...await findPlace(client), client, baseUrl, log: join(data, 'logs', 'worker.log') }
  const browser = await chromium.launch({ executablePath: '/usr/bin/chromium', args: FLAGS })
  try {
    const context = await browser.newContext({ viewport: { width: 1440, height: 900 } })
    await context.request.post(`${baseUrl}/api/auth/sign-in`, { data: { email: THERAPIST[0], password: THERAPIST[1] } })
    const cookie = (await context.cookies()).map(({ name, value }) => `${name}=${value}`).join('; ')
    if (isAsked('requests')) await benchRequests({ ...place, cookie, databaseUrl: env.STANDMARK_DATABASE_URL, clinicId: me.clinic.id, userId: me.id })
    if (isAsked('frames')) await benchFrames(context, place)
    if (isAsked('review')) await benchReviewCopy(place, uploadWhole)
    if (isAsked('upload')) await benchUpload({ ...place, context })
  } finally {
    await browser.close()
  }
}

if (isAsked('geometry')) await benchGeometry()
if (['requests', 'frames', 'review', 'upload'].some(isAsked)) {
  const data = process.env.STANDMARK_BENCH_DATA ?? mkdtempSync(join(tmpdir(), 'standmark-bench-data-'))
  const { web: port } = await choosePorts(['web'], {})
  stack(data, port, '--seed', '--detach')
  try {
    await benchServer(data, port)
  } finally {
    stack(data, port, '--stop')
    if (!process.env.STANDMARK_BENCH_DATA) rmSync(data, { recursive: true, force: true })
  }
}
console.log(`\n${reportLines().join('\n')}`)
