import { readFileSync } from 'node:fs'
import { createRequire } from 'node:module'
import { randomBytes } from 'node:crypto'
import { join } from 'node:path'
import { gzipSync } from 'node:zlib'
import { afterAll, describe, expect, it } from 'vitest'
import { HealthSchema } from '#shared/schemas/health'
import { PatientSchema } from '#shared/schemas/patient'
import { expectBody, expectError, expectIssueAt, expectNoLeak } from '../fixtures/api/answers'
import { createClient } from '../fixtures/api/client'
import { closeDatabase, query, withFault } from '../fixtures/api/database'
import { stack } from '../fixtures/api/environment'
import { makeClinic, makeStudent, makeTherapist, PASSWORD, unique } from '../fixtures/api/people'
import { boutBody, makePatient, makeSession, patientBody } from '../fixtures/api/records'
import { startServer } from '../fixtures/api/server'
import { makeGate } from '../fixtures/api/tcp-gate'

afterAll(closeDatabase)

const clinic = await makeClinic('errors')
const therapist = await makeTherapist(clinic)
const patient = await makePatient(therapist)
const { client } = therapist
const ABSENT = '01900000-0000-7000-8000-000000000000'
const MEGABYTE = 1024 * 1024

/** A JSON body of about this size, and of the right shape. */
function bigBody(bytes: number): string {
  return JSON.stringify({ ...patientBody(), notes: 'x'.repeat(bytes) })
}

/** Sends the text in pieces without telling its length. */
function inPieces(text: string): ReadableStream<Uint8Array> {
  const bytes = new TextEncoder().encode(text)
  let at = 0
  return new ReadableStream({
    pull(controller) {
      if (at >= bytes.length) return controller.close()
      controller.enqueue(bytes.subarray(at, at + 65_536))
      at += 65_536
    },
  })
}

describe('the error JSON', () => {
  it('is made by h3 1.15: version 2 loses code, message and data of every error', () => {
    const version = (path: string) => JSON.parse(readFileSync(path, 'utf8')).version
    const root = createRequire(import.meta.url).resolve('h3/package.json')
    expect(version(root)).toMatch(/^1\.(1[5-9]|[2-9]\d)\./)
    expect(version(join(stack.build, 'server/node_modules/h3/package.json'))).toBe(version(root))
  })

  it('400 validation-failed names every field at fault', async () => {
    const answer = await client.post('/api/patients', { name: '', weakerSide: 'up', birthDate: '2001-01-01', recordNumber: 'x' })
    const { issues } = expectError(answer, 400, 'validation-failed')
    expect(issues?.map(issue => issue.path).sort()).toEqual(['name', 'weakerSide'])
    expect(answer.json).toEqual({
      error: true, url: expect.stringContaining('/api/patients'), statusCode: 400, statusMessage: 'Bad Request', message: 'Some fields are not right',
      data: { code: 'validation-failed', requestId: answer.headers.get('x-request-id'), issues },
    })
  })

  it('401 not-signed-in', async () => {
    expect(expectError(await createClient().get('/api/patients'), 401, 'not-signed-in')).toEqual({ code: 'not-signed-in', requestId: expect.any(String) })
  })

  it('401 wrong-credentials', async () => {
    expectError(await createClient().post('/api/auth/sign-in', { email: `${unique('nobody')}@nowhere.example`, password: PASSWORD }), 401, 'wrong-credentials')
  })

  it('403 not-allowed', async () => {
    expectError(await (await makeStudent(clinic)).client.get('/api/patients'), 403, 'not-allowed')
  })

  it('403 cross-origin', async () => {
    expectError(await client.post('/api/patients', patientBody(), { headers: { 'sec-fetch-site': 'cross-site' } }), 403, 'cross-origin')
  })

  it('404 <thing>-not-found, and not-found for an address that is none', async () => {
    expectError(await client.get(`/api/patients/${ABSENT}`), 404, 'patient-not-found')
    for (const path of ['/api/nothing', '/api/patients/x/y/z', '/api/patients.json']) expectError(await client.get(path), 404, 'not-found')
    expectError(await createClient().post('/api/nothing', {}), 404, 'not-found')
  })

  it('405 method-not-allowed says which methods the address takes', async () => {
    const answer = await client.put('/api/patients', {})
    expectError(answer, 405, 'method-not-allowed')
    expect(answer.headers.get('allow')).toBe('GET, POST')
    expectError(await client.delete(`/api/patients/${patient.id}`), 405, 'method-not-allowed')
  })

  it('409 with its own code', async () => {
    const session = await makeSession(therapist, patient.id)
    await client.post(`/api/sessions/${session.id}/bouts`, boutBody())
    expect(expectError(await client.post(`/api/sessions/${session.id}/bouts`, boutBody()), 409, 'bout-overlaps').issues).toEqual([{ path: 'startedAt', message: 'overlaps' }])
  })

  it('412 stale-version carries the present state, and that in the shape of an answer', async () => {
    const { current } = expectError(await client.patch(`/api/patients/${patient.id}`, { heightCm: 170 }, { ifMatch: 99 }), 412, 'stale-version')
    expect(PatientSchema.strict().parse(current)).toEqual(patient)
  })

  it('428 version-required', async () => {
    expectError(await client.patch(`/api/patients/${patient.id}`, { heightCm: 170 }), 428, 'version-required')
  })

  it('422 idempotency-mismatch', async () => {
    const idempotencyKey = unique('key')
    await client.post('/api/patients', patientBody(), { idempotencyKey })
    expectError(await client.post('/api/patients', patientBody(), { idempotencyKey }), 422, 'idempotency-mismatch')
  })

  it('429 too-many-attempts with Retry-After', async () => {
    const email = `${unique('nobody')}@nowhere.example`
    for (let count = 0; count < 10; count++) await createClient().post('/api/auth/sign-in', { email, password: 'x' })
    const answer = await createClient().post('/api/auth/sign-in', { email, password: 'x' })
    expectError(answer, 429, 'too-many-attempts')
    expect(answer.headers.get('retry-after')).toMatch(/^[1-9]\d*$/)
  })
})

describe('413 body-too-large', () => {
  it.each([['POST', '/api/patients'], ['PATCH', `/api/patients/${patient.id}`], ['POST', '/api/measure'], ['POST', '/api/auth/sign-in']])('answers %s %s with 5 MB, with and without a told length', async (method, path) => {
    const text = bigBody(5 * MEGABYTE)
    expectError(await client.send(method, path, {}, { raw: text, ifMatch: 1 }), 413, 'body-too-large')
    expectError(await client.send(method, path, {}, { raw: inPieces(text), ifMatch: 1 }), 413, 'body-too-large')
  })

  it('takes a megabyte and not a byte more', async () => {
    const measure = (size: number) => {
      const text = JSON.stringify({ view: 'sagittal', width: 10, height: 10, landmarks: {}, notVisible: {} })
      return client.post('/api/measure', {}, { raw: text + ' '.repeat(size - text.length) })
    }
    expect((await measure(MEGABYTE)).status).toBe(200)
    expectError(await measure(MEGABYTE + 1), 413, 'body-too-large')
  })

  it('keeps nothing of it', async () => {
    const name = unique('Too Large')
    await client.post('/api/patients', {}, { raw: JSON.stringify({ ...patientBody({ name }), notes: 'x'.repeat(5 * MEGABYTE) }) })
    expect(await query(clinic.id, 'select id from patient where name = $1', [name])).toEqual([])
  })

  it('says who must sign in before it reads a body', async () => {
    expectError(await createClient().post('/api/patients', {}, { raw: bigBody(5 * MEGABYTE) }), 401, 'not-signed-in')
  })

  it('goes on serving others while and after 64 MB are thrown at it', async () => {
    const flood = client.post('/api/measure', {}, { raw: inPieces('x'.repeat(64 * MEGABYTE)) }).then(answer => answer.status, () => 'cut off')
    expect((await createClient().get('/api/me')).status).toBe(401)
    expect([413, 'cut off']).toContain(await flood)
    expect((await client.get('/api/me')).status).toBe(200)
  })
})

describe('415 unsupported-content-type', () => {
  it.each(['text/plain', 'application/x-www-form-urlencoded', 'multipart/form-data; boundary=x', 'application/jsonp', 'text/json', ''])('answers a body that is called «%s»', async (type) => {
    expectError(await client.post('/api/patients', undefined, { raw: JSON.stringify(patientBody()), headers: { 'content-type': type } }), 415, 'unsupported-content-type')
  })

  it('takes JSON with a charset and in any case', async () => {
    expect((await client.post('/api/patients', undefined, { raw: JSON.stringify(patientBody()), headers: { 'content-type': 'Application/JSON; charset=utf-8' } })).status).toBe(201)
  })
})

describe('input that is no input', () => {
  it.each([
    ['an empty body', ''], ['half of a body', '{"name":'], ['two bodies', '{}{}'], ['a comment', '{/* */}'], ['a single quote', '{\'name\':1}'], ['the word undefined', 'undefined'],
  ])('answers 400 for %s', async (_what, raw) => {
    expectIssueAt(await client.post('/api/patients', {}, { raw }), '')
  })

  it.each(['null', '42', '"text"', '[]', 'true'])('answers 400 for the JSON value %s', async (raw) => {
    expectIssueAt(await client.post('/api/patients', {}, { raw }), '')
  })

  it('answers 400 for bytes that are no UTF-8, and for packed ones', async () => {
    expectIssueAt(await client.post('/api/patients', {}, { raw: new Uint8Array([0x7b, 0x22, 0xff, 0xfe, 0x22, 0x3a, 0x31, 0x7d]) }), '')
    expectIssueAt(await client.post('/api/patients', {}, { raw: new Uint8Array(gzipSync(JSON.stringify(patientBody()))), headers: { 'content-encoding': 'gzip' } }), '')
  })

  it('answers 400 for a hundred thousand brackets', async () => {
    expectError(await client.post('/api/patients', {}, { raw: '['.repeat(100_000) + ']'.repeat(100_000) }), 400, 'validation-failed')
    expectError(await client.post('/api/measure', {}, { raw: `{"landmarks":${'{"a":'.repeat(50_000)}1${'}'.repeat(50_000)}}` }), 400, 'validation-failed')
  })

  it('names at most fifty fields', async () => {
    const precautions = Array.from({ length: 20 }, () => Object.fromEntries(Array.from({ length: 5 }, (_, index) => [`k${index}`, 1])))
    const vitals = Array.from({ length: 40 }, () => ({ at: 1, posture: 1, systolic: 'x' }))
    const session = await makeSession(therapist, patient.id)
    expect(expectError(await client.post('/api/patients', patientBody({ precautions })), 400, 'validation-failed').issues?.length).toBeLessThanOrEqual(50)
    expect(expectError(await client.post(`/api/sessions/${session.id}/bouts`, boutBody(0, { vitals })), 400, 'validation-failed').issues).toHaveLength(50)
  })

  it.each(['%E0%A4%A', '%00', '..%2f..%2fetc%2fpasswd', '%2e%2e', 'x'.repeat(3000), '\'; drop table patient; --', '0x01900000', '1e3', '-1', '9'.repeat(40)])('answers 404 for the id %s', async (id) => {
    const answer = await client.get(`/api/patients/${id}`)
    expect(answer.status).toBe(404)
    expectNoLeak(answer)
  })

  it('answers 400 or a list, and never 500, for a query that cannot be decoded', async () => {
    const answer = await client.get('/api/patients?search=%E0%A4%A')
    expect([200, 400]).toContain(answer.status)
  })
})

describe('500 internal', () => {
  it('tells nothing of the fault, and the log names the request but no person', async () => {
    const name = unique('Quentin Fault')
    const server = await startServer()
    try {
      const own = createClient({ baseUrl: server.baseUrl })
      await own.post('/api/auth/sign-in', { email: therapist.email, password: PASSWORD })
      const answer = await withFault('patient', `new.name = '${name}'`, () => own.post('/api/patients', patientBody({ name })))
      const { requestId } = expectError(answer, 500, 'internal')
      expect(answer.json).toMatchObject({ message: 'Something went wrong on our side' })
      expect(answer.text).not.toContain('Quentin')
      const lines = server.output.stdout.split('\n').filter(line => line.includes(requestId))
      expect(lines).toHaveLength(1)
      expect(JSON.parse(lines[0] ?? '')).toMatchObject({ level: 50, code: 'internal', err: expect.anything() })
      expect(server.output.stdout + server.output.stderr).not.toMatch(/Quentin|Sandqvist|select secret/)
      expect(await query(clinic.id, 'select id from patient where name = $1', [name])).toEqual([])
    } finally {
      await server.stop()
    }
  })
})

describe('503 database-unavailable', async () => {
  const url = new URL(stack.databaseUrl)
  const gate = await makeGate(url)
  url.port = String(gate.port)
  const server = await startServer({ STANDMARK_DATABASE_URL: url.href, STANDMARK_SECRET: randomBytes(36).toString('base64') })
  afterAll(async () => {
    await server.stop()
    await gate.shut()
  })
  const own = createClient({ baseUrl: server.baseUrl })
  const signedIn = await own.post('/api/auth/sign-in', { email: therapist.email, password: PASSWORD })
  if (signedIn.status !== 200) throw new Error(signedIn.text)
  const health = () => createClient({ baseUrl: server.baseUrl }).get('/api/health')
  const untilHealthKeepsNothing = () => new Promise(resolve => setTimeout(resolve, 1100))

  it('is not there while the database answers', async () => {
    expect((await own.get('/api/patients')).status).toBe(200)
    const answer = expectBody(await health(), 200, HealthSchema)
    expect(answer.checks).toMatchObject({ database: 'up', storage: 'up', mail: 'not-configured' })
    expect(['ok', 'degraded']).toContain(answer.status)
  })

  it('is the answer of every route while the database is away, with Retry-After and no word about where it is', async () => {
    await gate.shut()
    const answers = [
      await own.get('/api/patients'), await own.get('/api/me'), await own.post('/api/patients', patientBody()), await own.get(`/api/patients/${patient.id}`),
      await createClient({ baseUrl: server.baseUrl }).post('/api/auth/sign-in', { email: therapist.email, password: PASSWORD }),
    ]
    for (const answer of answers) {
      expectError(answer, 503, 'database-unavailable')
      expect(answer.headers.get('retry-after')).toMatch(/^\d+$/)
      expect(answer.text).not.toContain(String(gate.port))
    }
    expectError(await createClient({ baseUrl: server.baseUrl }).get('/api/me'), 401, 'not-signed-in')
  })

  it('shows in GET /api/health, without secrets', async () => {
    await untilHealthKeepsNothing()
    const answer = await health()
    expect(expectBody(answer, 503, HealthSchema)).toMatchObject({ status: 'down', checks: { database: 'down', storage: 'up' } })
    expect(answer.headers.get('retry-after')).toMatch(/^\d+$/)
    for (const secret of [url.password, url.username, stack.storage.secret, stack.storage.key, String(gate.port)]) expect(answer.text).not.toContain(secret)
  })

  it('ends by itself when the database is back', async () => {
    await gate.open()
    expect((await own.get('/api/patients')).status).toBe(200)
    await untilHealthKeepsNothing()
    expect((await health()).status).toBe(200)
  })

  it('comes in good time when the database hangs instead of refusing', async () => {
    gate.hang()
    const begun = Date.now()
    expectError(await own.get('/api/patients'), 503, 'database-unavailable')
    expect(Date.now() - begun).toBeLessThan(10_000)
    await gate.open()
    expect((await own.get('/api/patients')).status).toBe(200)
  })

  it('loses and doubles nothing: what was acknowledged is there once', async () => {
    const acknowledged: string[] = []
    const statuses = new Set<number>()
    async function work(): Promise<void> {
      for (let count = 0; count < 12; count++) {
        const body = patientBody()
        const answer = await own.post('/api/patients', body)
        statuses.add(answer.status)
        if (answer.status === 201) acknowledged.push(String(body.recordNumber))
        // Others are in the middle of their writes when this cuts the connections.
        if (acknowledged.length === 8) await gate.shut()
      }
    }
    await Promise.all([work(), work(), work(), work()])
    await gate.open()
    const rows = await query<{ count: number }>(clinic.id, 'select count(*)::int as count from patient where record_number = any($1)', [acknowledged])
    expect([...statuses].sort()).toEqual([201, 503])
    expect(rows[0]?.count).toBe(acknowledged.length)
    expect((await own.get('/api/patients')).status).toBe(200)
  })
})

describe('503 storage-unavailable', () => {
  it('shows in GET /api/health as down', async () => {
    const server = await startServer({ STANDMARK_STORAGE_ENDPOINT: 'http://127.0.0.1:9' })
    try {
      expect(expectBody(await createClient({ baseUrl: server.baseUrl }).get('/api/health'), 503, HealthSchema)).toMatchObject({ status: 'down', checks: { database: 'up', storage: 'down' } })
    } finally {
      await server.stop()
    }
  })
})
