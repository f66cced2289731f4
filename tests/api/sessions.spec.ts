import { afterAll, describe, expect, it } from 'vitest'
import { SessionDetailSchema, SessionListSchema, SessionSchema } from '#shared/schemas/session'
import { PatientSchema } from '#shared/schemas/patient'
import { comparable, expectBody, expectError, expectIssueAt } from '../fixtures/api/answers'
import { createClient } from '../fixtures/api/client'
import { auditOf, closeDatabase } from '../fixtures/api/database'
import { makeAdministrator, makeClinic, makePatientAccount, makeStudent, makeTherapist } from '../fixtures/api/people'
import { makeBout, makePatient, makeSession, makeStill } from '../fixtures/api/records'

afterAll(closeDatabase)

const clinic = await makeClinic('sessions')
const therapist = await makeTherapist(clinic)
const colleague = await makeTherapist(clinic)
const stranger = await makeTherapist(await makeClinic('sessions-elsewhere'))
const patient = await makePatient(therapist, { massKg: 80 })
const ABSENT = '01900000-0000-7000-8000-000000000000'

describe('POST /api/patients/:id/sessions', () => {
  it('starts a session with note and checklist, in UTC, and writes an audit row', async () => {
    const checklist = [{ item: 'Blood pressure taken', isDone: true, note: '128/76 sitting' }, { item: 'Shoes on', isDone: false }]
    const answer = await therapist.client.post(`/api/patients/${patient.id}/sessions`, { startedAt: '2026-11-02T10:00:00+01:00', notes: 'Slept badly.\n', checklist })
    const session = expectBody(answer, 201, SessionSchema)
    expect(session).toEqual({
      id: expect.any(String), patientId: patient.id, startedAt: '2026-11-02T09:00:00.000Z', notes: 'Slept badly.', checklist, massKg: 80, createdBy: therapist.id, version: 1,
    })
    expect(answer.headers.get('etag')).toBe('"1"')
    expect(await auditOf(clinic.id, { requestId: answer.headers.get('x-request-id') ?? '' }))
      .toMatchObject([{ action: 'session.create', actor_id: therapist.id, target_id: session.id, patient_id: patient.id }])
  })

  it('keeps the mass of that day: a later change of the chart does not move past percentages', async () => {
    const person = await makePatient(therapist, { massKg: 80 })
    const session = await makeSession(therapist, person.id)
    await makeBout(therapist, session.id, 0, { weightOffKg: 20 })
    expectBody(await therapist.client.patch(`/api/patients/${person.id}`, { massKg: 100 }, { ifMatch: 1 }), 200, PatientSchema)
    const kept = expectBody(await therapist.client.get(`/api/sessions/${session.id}`), 200, SessionDetailSchema)
    expect(kept.massKg).toBe(80)
    expect(kept.bouts.map(bout => bout.supportPercent)).toEqual([25])
    expect((await makeSession(therapist, person.id)).massKg).toBe(100)
  })

  it('keeps no mass where none is known', async () => {
    expect((await makeSession(therapist, (await makePatient(therapist, { massKg: null })).id)).massKg).toBeNull()
  })

  it.each([
    ['no start', { startedAt: undefined }, 'startedAt'], ['a start without a zone', { startedAt: '2026-11-02T09:00:00' }, 'startedAt'],
    ['a day that does not exist', { startedAt: '2026-02-30T09:00:00Z' }, 'startedAt'], ['a number', { startedAt: 1_700_000_000_000 }, 'startedAt'],
    ['notes of 8001 characters', { notes: 'x'.repeat(8001) }, 'notes'], ['a NUL character', { notes: 'a\u0000' }, 'notes'],
    ['61 answers', { checklist: Array.from({ length: 61 }, () => ({ item: 'x', isDone: true })) }, 'checklist'],
    ['an answer without its item', { checklist: [{ isDone: true }] }, 'checklist.0.item'], ['half of a character pair', { checklist: [{ item: 'a\udc00', isDone: true }] }, 'checklist.0.item'],
    ['a mass', { massKg: 70 }, ''], ['an author', { createdBy: ABSENT }, ''],
  ])('answers 400 naming the field for %s', async (_what, fields, path) => {
    expectIssueAt(await therapist.client.post(`/api/patients/${patient.id}/sessions`, { startedAt: '2026-11-02T09:00:00Z', ...fields }), path)
  })

  it('answers 401, 403 and 404', async () => {
    const send = (client: typeof therapist.client) => client.post(`/api/patients/${patient.id}/sessions`, { startedAt: '2026-11-02T09:00:00Z' })
    expectError(await send(createClient()), 401, 'not-signed-in')
    expectError(await send((await makeAdministrator(clinic)).client), 403, 'not-allowed')
    expectError(await send(colleague.client), 404, 'patient-not-found')
    expectError(await send(stranger.client), 404, 'patient-not-found')
  })
})

describe('GET /api/sessions/:id', () => {
  it('answers the session with its patient\'s name and its bouts in order', async () => {
    const session = await makeSession(therapist, patient.id, { startedAt: '2026-09-01T09:00:00Z' })
    const bouts = [
      await makeBout(therapist, session.id, 0, { startedAt: '2026-09-01T09:10:00Z', endedAt: '2026-09-01T09:11:00Z' }),
      await makeBout(therapist, session.id, 0, { startedAt: '2026-09-01T09:00:00Z', endedAt: '2026-09-01T09:02:00Z' }),
    ]
    expect(expectBody(await therapist.client.get(`/api/sessions/${session.id}`), 200, SessionDetailSchema))
      .toEqual({ ...session, patientName: patient.name, bouts: [bouts[1], bouts[0]] })
  })

  it('answers the same 404 for an absent one, another team\'s, another clinic\'s and a malformed id', async () => {
    const session = await makeSession(therapist, patient.id)
    const answers = [
      await therapist.client.get(`/api/sessions/${ABSENT}`), await colleague.client.get(`/api/sessions/${session.id}`),
      await stranger.client.get(`/api/sessions/${session.id}`), await therapist.client.get('/api/sessions/-1'),
    ]
    for (const answer of answers) expectError(answer, 404, 'session-not-found')
    expect(new Set(answers.map(answer => JSON.stringify(comparable(answer)))).size).toBe(1)
  })

  it('answers 401 and 403', async () => {
    const session = await makeSession(therapist, patient.id)
    expectError(await createClient().get(`/api/sessions/${session.id}`), 401, 'not-signed-in')
    expectError(await (await makeStudent(clinic)).client.get(`/api/sessions/${session.id}`), 403, 'not-allowed')
    expectError(await (await makePatientAccount(clinic, patient.id)).client.get(`/api/sessions/${session.id}`), 403, 'not-allowed')
  })
})

describe('PATCH /api/sessions/:id', () => {
  it('changes note, start and checklist, counts the version up and audits which fields changed', async () => {
    const session = await makeSession(therapist, patient.id, { notes: 'before' })
    const answer = await therapist.client.patch(`/api/sessions/${session.id}`, { notes: null, startedAt: '2026-11-02T08:30:00Z', checklist: [{ item: 'Shoes on', isDone: true }] }, { ifMatch: '"1"' })
    expect(expectBody(answer, 200, SessionSchema)).toEqual({ ...session, notes: null, startedAt: '2026-11-02T08:30:00.000Z', checklist: [{ item: 'Shoes on', isDone: true }], version: 2 })
    expect(answer.headers.get('etag')).toBe('"2"')
    const rows = await auditOf(clinic.id, { requestId: answer.headers.get('x-request-id') ?? '' })
    expect(rows).toMatchObject([{ action: 'session.change', actor_id: therapist.id, target_id: session.id, before: { version: 1 }, after: { version: 2 } }])
  })

  it('answers 428 without a version and 412 with the present state for another one', async () => {
    const session = await makeSession(therapist, patient.id)
    expectError(await therapist.client.patch(`/api/sessions/${session.id}`, { notes: 'x' }), 428, 'version-required')
    expect(expectError(await therapist.client.patch(`/api/sessions/${session.id}`, { notes: 'x' }, { ifMatch: 2 }), 412, 'stale-version').current).toEqual(session)
  })

  it('answers 400 for nothing to change, an unknown key and the mass of the day', async () => {
    const session = await makeSession(therapist, patient.id)
    for (const body of [{}, { colour: 'red' }, { massKg: 10 }, { patientId: ABSENT }]) {
      expectIssueAt(await therapist.client.patch(`/api/sessions/${session.id}`, body, { ifMatch: 1 }), '')
    }
  })

  it('answers 401, 403 and 404', async () => {
    const session = await makeSession(therapist, patient.id)
    const send = (client: typeof therapist.client) => client.patch(`/api/sessions/${session.id}`, { notes: 'x' }, { ifMatch: 1 })
    expectError(await send(createClient()), 401, 'not-signed-in')
    expectError(await send((await makeAdministrator(clinic)).client), 403, 'not-allowed')
    expectError(await send(colleague.client), 404, 'session-not-found')
    expectError(await send(stranger.client), 404, 'session-not-found')
  })
})

describe('GET /api/patients/:id/sessions and GET /api/sessions', async () => {
  const ward = await makeClinic('sessions-list')
  const reader = await makeTherapist(ward)
  const [one, two] = [await makePatient(reader, { name: 'One', massKg: 50 }), await makePatient(reader, { name: 'Two' })]
  const other = await makeTherapist(ward)
  await makeSession(other, (await makePatient(other)).id)
  const first = await makeSession(reader, one.id, { startedAt: '2026-11-01T09:00:00Z' })
  const second = await makeSession(reader, one.id, { startedAt: '2026-11-02T09:00:00Z' })
  const third = await makeSession(reader, two.id, { startedAt: '2026-11-03T09:00:00Z' })
  await makeBout(reader, second.id, 0, { weightOffKg: 20, helpers: 2, assistance: 'substantial' })
  await makeBout(reader, second.id, 10, { endedAt: '2026-11-02T09:15:00Z', weightOffKg: 10, helpers: 1, assistance: 'partial' })
  await makeBout(reader, second.id, 20, { endedAt: null, weightOffKg: 5, helpers: 0, assistance: 'supervision' })
  await makeStill(reader, second)
  await makeStill(reader, second, { status: 'uploading' })

  const ids = async (path: string) => expectBody(await reader.client.get(path), 200, SessionListSchema).items.map(item => item.id)

  it('lists newest first, of one patient or of all that this person may see', async () => {
    expect(await ids(`/api/patients/${one.id}/sessions`)).toEqual([second.id, first.id])
    expect(await ids('/api/sessions')).toEqual([third.id, second.id, first.id])
  })

  it('sums the bouts up; support and help are those of the last one; uploads that are not there yet do not count as clips', async () => {
    const { items } = expectBody(await reader.client.get(`/api/patients/${one.id}/sessions`), 200, SessionListSchema)
    expect(items[0]).toMatchObject({
      id: second.id, patientName: 'One', boutCount: 3, isRunning: true, longestBoutMs: 300_000, totalBoutMs: 420_000, supportPercent: 10, assistance: 'supervision', helpers: 0, clipCount: 1,
    })
    expect(items[1]).toMatchObject({ id: first.id, boutCount: 0, isRunning: false, longestBoutMs: null, totalBoutMs: 0, supportPercent: null, assistance: null, helpers: null, clipCount: 0 })
  })

  it('narrows to a period, its ends included', async () => {
    expect(await ids('/api/sessions?from=2026-11-02T09:00:00Z')).toEqual([third.id, second.id])
    expect(await ids('/api/sessions?to=2026-11-02T09:00:00Z')).toEqual([second.id, first.id])
    expect(await ids('/api/sessions?from=2026-11-02T10:00:00%2B01:00&to=2026-11-02T09:00:00Z')).toEqual([second.id])
  })

  it('pages', async () => {
    const page = expectBody(await reader.client.get('/api/sessions?page=2&pageSize=2'), 200, SessionListSchema)
    expect(page).toMatchObject({ total: 3, page: 2, pageSize: 2 })
    expect(page.items.map(item => item.id)).toEqual([first.id])
  })

  it.each(['pageSize=0', 'pageSize=201', 'page=0', 'from=yesterday', 'from=2026-11-02', 'to=', 'sort=name'])('answers 400 for ?%s', async (text) => {
    for (const path of ['/api/sessions', `/api/patients/${one.id}/sessions`]) expectError(await reader.client.get(`${path}?${text}`), 400, 'validation-failed')
  })

  it('answers 401, 403 and 404', async () => {
    expectError(await createClient().get('/api/sessions'), 401, 'not-signed-in')
    expectError(await createClient().get(`/api/patients/${one.id}/sessions`), 401, 'not-signed-in')
    const student = await makeStudent(ward)
    expectError(await student.client.get('/api/sessions'), 403, 'not-allowed')
    expectError(await student.client.get(`/api/patients/${one.id}/sessions`), 403, 'not-allowed')
    expectError(await other.client.get(`/api/patients/${one.id}/sessions`), 404, 'patient-not-found')
    expectError(await stranger.client.get(`/api/patients/${one.id}/sessions`), 404, 'patient-not-found')
  })
})
