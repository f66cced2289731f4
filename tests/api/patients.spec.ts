import { afterAll, describe, expect, it } from 'vitest'
import { ChartSchema, PatientListSchema, PatientSchema } from '#shared/schemas/patient'
import { comparable, expectBody, expectError, expectIssueAt } from '../fixtures/api/answers'
import { createClient } from '../fixtures/api/client'
import { auditOf, closeDatabase, query } from '../fixtures/api/database'
import { makeAdministrator, makeClinic, makePatientAccount, makeStudent, makeTherapist, unique } from '../fixtures/api/people'
import { makeBout, makeConsent, makeMarking, makePatient, makeSession, makeStill, patientBody } from '../fixtures/api/records'

afterAll(closeDatabase)

const clinic = await makeClinic('patients')
const therapist = await makeTherapist(clinic, 'Tove Marchetti')
const colleague = await makeTherapist(clinic, 'Una Colleague')
const stranger = await makeTherapist(await makeClinic('patients-elsewhere'))
const ABSENT = '01900000-0000-7000-8000-000000000000'

async function countPatients(): Promise<number> {
  const [row] = await query<{ count: number }>(clinic.id, 'select count(*)::int as count from patient')
  return row?.count ?? Number.NaN
}

describe('POST /api/patients', () => {
  it('creates a patient, puts the creator on the care team and writes an audit row', async () => {
    const body = patientBody({
      name: '  Bjarte Ålund <b>"x"</b> ', strokeOn: '2026-10-01', lateropulsion: 'left', neglectSide: 'left', visualFieldLossSide: 'right', hasAphasia: true,
      precautions: [{ kind: 'shoulder-pain', note: 'sling in standing' }], notes: 'First line\nROM < 90 deg & rising\t(approx.)',
    })
    const answer = await therapist.client.post('/api/patients', body)
    const patient = expectBody(answer, 201, PatientSchema)
    expect(patient).toMatchObject({ ...body, name: 'Bjarte Ålund <b>"x"</b>', version: 1 })
    expect(answer.headers.get('etag')).toBe('"1"')
    const chart = expectBody(await therapist.client.get(`/api/patients/${patient.id}`), 200, ChartSchema)
    expect(chart.careTeam.map(member => member.userId)).toEqual([therapist.id])
    expect(await auditOf(clinic.id, { requestId: answer.headers.get('x-request-id') ?? '' }))
      .toMatchObject([{ action: 'patient.create', actor_id: therapist.id, target_type: 'patient', target_id: patient.id, patient_id: patient.id }])
  })

  it('needs no height, mass or other optional field', async () => {
    const { heightCm: _h, massKg: _m, ...least } = patientBody()
    expect(expectBody(await therapist.client.post('/api/patients', least), 201, PatientSchema))
      .toMatchObject({ heightCm: null, massKg: null, strokeOn: null, precautions: [], hasAphasia: false, notes: null })
  })

  it('answers 409 at the field for a record number of the clinic that is taken, and keeps nothing', async () => {
    const first = await makePatient(therapist)
    const before = await countPatients()
    for (const person of [therapist, colleague]) {
      const { issues } = expectError(await person.client.post('/api/patients', patientBody({ recordNumber: ` ${first.recordNumber} ` })), 409, 'record-number-taken')
      expect(issues).toEqual([{ path: 'recordNumber', message: 'taken' }])
    }
    expect(await countPatients()).toBe(before)
  })

  it('lets another clinic use the same record number', async () => {
    const { recordNumber } = await makePatient(therapist)
    expect((await makePatient(stranger, { recordNumber })).recordNumber).toBe(recordNumber)
  })

  it('lets one of twenty parallel creations with one record number through', async () => {
    const body = patientBody()
    const answers = await Promise.all(Array.from({ length: 20 }, () => therapist.client.post('/api/patients', body)))
    const statuses = answers.map(answer => answer.status).sort()
    expect(statuses).toEqual([201, ...Array.from({ length: 19 }, () => 409)])
  })

  it.each([
    ['no name', { name: undefined }, 'name'],
    ['a blank name', { name: '   ' }, 'name'],
    ['a name of 201 characters', { name: 'x'.repeat(201) }, 'name'],
    ['a NUL character', { name: 'A\u0000B' }, 'name'],
    ['an escape character', { name: 'A\u001b[31mB' }, 'name'],
    ['a line break in a name', { name: 'A\nB' }, 'name'],
    ['half of a character pair', { name: 'A\ud83d' }, 'name'],
    ['half of a character pair in a nested note', { precautions: [{ kind: 'other', note: 'A\ud83d' }] }, 'precautions.0.note'],
    ['a NUL character in the notes', { notes: 'A\u0000B' }, 'notes'],
    ['a name that is no text', { name: 42 }, 'name'],
    ['no record number', { recordNumber: '' }, 'recordNumber'],
    ['a day that does not exist', { birthDate: '2001-02-29' }, 'birthDate'],
    ['a birth date with a time', { birthDate: '2001-02-28T00:00:00Z' }, 'birthDate'],
    ['a birth date in the future', { birthDate: '2999-01-01' }, 'birthDate'],
    ['a birth date before 1900', { birthDate: '1899-12-31' }, 'birthDate'],
    ['an unknown side', { weakerSide: 'up' }, 'weakerSide'],
    ['a height of 500 cm', { heightCm: 500 }, 'heightCm'],
    ['a mass of 0 kg', { massKg: 0 }, 'massKg'],
    ['a mass as text', { massKg: '80' }, 'massKg'],
    ['an unknown precaution', { precautions: [{ kind: 'no-such-thing' }] }, 'precautions.0.kind'],
    ['an unknown key', { nickname: 'x' }, ''],
    ['a role', { role: 'administrator' }, ''],
    ['a clinic', { clinicId: stranger.clinic.id }, ''],
    ['an id', { id: ABSENT }, ''],
    ['a version', { version: 7 }, ''],
  ])('answers 400 naming the field for %s', async (_what, fields, path) => {
    expectIssueAt(await therapist.client.post('/api/patients', patientBody(fields)), path)
  })

  it('answers 400 for a mass beyond every number', async () => {
    const raw = JSON.stringify(patientBody({ massKg: 'HERE' })).replace('"HERE"', '1e309')
    expectIssueAt(await therapist.client.post('/api/patients', {}, { raw }), 'massKg')
  })

  it('takes a key named __proto__ for an unknown key', async () => {
    const raw = JSON.stringify(patientBody()).replace('{', '{"__proto__":{"isAdmin":true},')
    const answer = await therapist.client.post('/api/patients', {}, { raw })
    expect([201, 400]).toContain(answer.status)
    expect(answer.text).not.toContain('isAdmin')
    expect((await therapist.client.get('/api/audit')).status).toBe(403)
  })

  it('answers 401 without a session and 403 to every other role', async () => {
    expectError(await createClient().post('/api/patients', patientBody()), 401, 'not-signed-in')
    const own = await makePatient(therapist)
    for (const person of [await makeStudent(clinic), await makeAdministrator(clinic), await makePatientAccount(clinic, own.id)]) {
      expectError(await person.client.post('/api/patients', patientBody()), 403, 'not-allowed')
    }
  })
})

describe('GET /api/patients/:id', () => {
  it('answers the chart with team, consents, access and the two numbers of its header, and audits the opening', async () => {
    const patient = await makePatient(therapist)
    const consent = await makeConsent(therapist, patient.id)
    const session = await makeSession(therapist, patient.id)
    await makeBout(therapist, session.id, 0)
    await makeBout(therapist, session.id, 10, { endedAt: '2026-11-02T09:15:00.000Z' })
    const { stillId } = await makeStill(therapist, session)
    await makeMarking(therapist, stillId)
    const answer = await therapist.client.get(`/api/patients/${patient.id}`)
    const chart = expectBody(answer, 200, ChartSchema)
    expect(chart).toMatchObject({ ...patient, access: { kind: 'care-team', expiresAt: null }, longestBoutMs: 300_000, consents: [consent] })
    expect(chart.careTeam).toEqual([{ userId: therapist.id, name: 'Tove Marchetti', joinedAt: expect.any(String) }])
    expect(chart.lastTrunkReading).toMatchObject({ measure: 'trunkInclination', at: session.startedAt })
    expect(chart.lastTrunkReading?.value).toBeCloseTo(-2.2026, 3)
    expect(answer.headers.get('etag')).toBe('"1"')
    expect(await auditOf(clinic.id, { requestId: answer.headers.get('x-request-id') ?? '' }))
      .toMatchObject([{ action: 'patient.open', actor_id: therapist.id, patient_id: patient.id }])
  })

  it('answers the same 404 for an absent patient, one of another team, one of another clinic and a malformed id', async () => {
    const patient = await makePatient(therapist)
    const answers = [
      await therapist.client.get(`/api/patients/${ABSENT}`),
      await colleague.client.get(`/api/patients/${patient.id}`),
      await stranger.client.get(`/api/patients/${patient.id}`),
      await therapist.client.get('/api/patients/1'),
      await therapist.client.get(`/api/patients/${patient.id.slice(0, -1)}%00`),
    ]
    for (const answer of answers) expectError(answer, 404, 'patient-not-found')
    expect(new Set(answers.map(answer => JSON.stringify(comparable(answer)))).size).toBe(1)
  })

  it('audits no opening of a chart that was not opened', async () => {
    const patient = await makePatient(therapist)
    const answer = await colleague.client.get(`/api/patients/${patient.id}`)
    expect(await auditOf(clinic.id, { requestId: answer.headers.get('x-request-id') ?? '' })).toEqual([])
  })

  it('answers 404 to an administrator without an opening', async () => {
    const patient = await makePatient(therapist)
    expectError(await (await makeAdministrator(clinic)).client.get(`/api/patients/${patient.id}`), 404, 'patient-not-found')
  })

  it('answers 401 and 403', async () => {
    const patient = await makePatient(therapist)
    expectError(await createClient().get(`/api/patients/${patient.id}`), 401, 'not-signed-in')
    expectError(await (await makeStudent(clinic)).client.get(`/api/patients/${patient.id}`), 403, 'not-allowed')
    expectError(await (await makePatientAccount(clinic, patient.id)).client.get(`/api/patients/${patient.id}`), 403, 'not-allowed')
  })
})

describe('GET /api/patients', async () => {
  const list = async (text: string, person = reader) => expectBody(await person.client.get(`/api/patients${text}`), 200, PatientListSchema)
  const names = async (text: string) => (await list(text)).items.map(item => item.name)
  const ward = await makeClinic('patients-list')
  const reader = await makeTherapist(ward)
  const [percent, underscore, backslash, plain] = [
    await makePatient(reader, { name: 'Zed 100% Sure', birthDate: '1940-01-01', recordNumber: 'A-3' }),
    await makePatient(reader, { name: 'ada under_score', birthDate: '1970-01-01', recordNumber: 'A-1' }),
    await makePatient(reader, { name: 'Back\\slash Berg', birthDate: '1950-01-01', recordNumber: 'A-2' }),
    await makePatient(reader, { name: 'Müller Ørsted', birthDate: '1960-01-01', recordNumber: 'B-1' }),
  ]
  await makePatient(await makeTherapist(ward), { name: 'Not Mine', recordNumber: 'A-9' })
  await makeSession(reader, backslash.id, { startedAt: '2026-11-05T08:00:00Z' })
  const late = await makeSession(reader, plain.id, { startedAt: '2026-11-06T08:00:00Z' })
  await makeSession(reader, plain.id, { startedAt: '2026-11-01T08:00:00Z' })
  await makeBout(reader, late.id)

  it('lists the patients of the person\'s care teams and nobody else\'s', async () => {
    const { items, total, page, pageSize } = await list('')
    expect(items.map(item => item.id).sort()).toEqual([percent.id, underscore.id, backslash.id, plain.id].sort())
    expect({ total, page, pageSize }).toEqual({ total: 4, page: 1, pageSize: 50 })
  })

  it('adds the last session and the longest bout', async () => {
    const { items } = await list('?search=Ørsted')
    expect(items).toMatchObject([{ id: plain.id, lastSessionAt: '2026-11-06T08:00:00.000Z', longestBoutMs: 120_000 }])
    expect((await list('?search=Sure')).items).toMatchObject([{ lastSessionAt: null, longestBoutMs: null }])
  })

  it.each([
    ['part of a name in any case', 'müLLer', ['Müller Ørsted']],
    ['a record number', 'b-1', ['Müller Ørsted']],
    ['a percent sign as itself', '%', ['Zed 100% Sure']],
    ['an underscore as itself', '_', ['ada under_score']],
    ['a backslash as itself', '\\', ['Back\\slash Berg']],
    ['blanks around the word', ' sure ', ['Zed 100% Sure']],
    ['a quote', '\' or 1=1 --', []],
    ['a name of another team', 'Not Mine', []],
  ])('searches by %s', async (_what, word, found) => {
    expect(await names(`?search=${encodeURIComponent(word)}`)).toEqual(found)
  })

  it.each([
    ['name', ['ada under_score', 'Back\\slash Berg', 'Müller Ørsted', 'Zed 100% Sure']],
    ['-name', ['Zed 100% Sure', 'Müller Ørsted', 'Back\\slash Berg', 'ada under_score']],
    ['recordNumber', ['ada under_score', 'Back\\slash Berg', 'Zed 100% Sure', 'Müller Ørsted']],
    ['-birthDate', ['ada under_score', 'Müller Ørsted', 'Back\\slash Berg', 'Zed 100% Sure']],
    ['createdAt', ['Zed 100% Sure', 'ada under_score', 'Back\\slash Berg', 'Müller Ørsted']],
  ])('sorts by %s', async (sort, expected) => {
    expect(await names(`?sort=${sort}`)).toEqual(expected)
  })

  it('sorts by the last session, those without one at the end both ways', async () => {
    expect((await names('?sort=lastSessionAt')).slice(0, 2)).toEqual(['Back\\slash Berg', 'Müller Ørsted'])
    expect((await names('?sort=-lastSessionAt')).slice(0, 2)).toEqual(['Müller Ørsted', 'Back\\slash Berg'])
  })

  it('pages without losing or repeating anyone', async () => {
    const pages = [await list('?pageSize=3'), await list('?pageSize=3&page=2'), await list('?pageSize=3&page=3')]
    expect(pages.map(page => page.items.length)).toEqual([3, 1, 0])
    expect(pages.map(page => page.total)).toEqual([4, 4, 4])
    expect(new Set(pages.flatMap(page => page.items.map(item => item.id))).size).toBe(4)
    expect((await list('?pageSize=200')).pageSize).toBe(200)
    expect((await list('?pageSize=1')).items).toHaveLength(1)
  })

  it.each([
    ['pageSize=0', 'pageSize'], ['pageSize=201', 'pageSize'], ['pageSize=-1', 'pageSize'], ['pageSize=1.5', 'pageSize'], ['pageSize=many', 'pageSize'], ['pageSize=', 'pageSize'],
    ['page=0', 'page'], ['page=1e309', 'page'], ['page=1&page=2', 'page'],
    ['sort=massKg', 'sort'], ['sort=--name', 'sort'], ['sort=', 'sort'], ['sort=name;drop', 'sort'],
    ['search=a&search=b', 'search'], [`search=${'x'.repeat(201)}`, 'search'], ['search=%00', 'search'], ['filter=x', ''],
  ])('answers 400 for ?%s', async (text, path) => {
    expectIssueAt(await reader.client.get(`/api/patients?${text}`), path)
  })

  it('answers 401 and 403', async () => {
    expectError(await createClient().get('/api/patients'), 401, 'not-signed-in')
    expectError(await (await makeStudent(ward)).client.get('/api/patients'), 403, 'not-allowed')
  })
})

describe('PATCH /api/patients/:id', () => {
  it('changes the named fields, counts the version up and audits which fields changed without their content', async () => {
    const patient = await makePatient(therapist, { notes: 'before' })
    const answer = await therapist.client.patch(`/api/patients/${patient.id}`, { name: 'Changed Name', notes: null }, { ifMatch: 1 })
    expect(expectBody(answer, 200, PatientSchema)).toEqual({ ...patient, name: 'Changed Name', notes: null, version: 2, updatedAt: expect.any(String) })
    expect(answer.headers.get('etag')).toBe('"2"')
    const rows = await auditOf(clinic.id, { requestId: answer.headers.get('x-request-id') ?? '' })
    expect(rows).toMatchObject([{ action: 'patient.change', patient_id: patient.id, before: { version: 1 }, after: { version: 2 } }])
    expect(rows[0]?.after?.fields).toEqual(expect.arrayContaining(['name', 'notes']))
    expect(JSON.stringify(rows)).not.toMatch(/Changed Name|before"?:? ?"before/)
  })

  it.each([['3', '3'], ['"3"', '"3"']])('takes the version written as %s', async (_as, ifMatch) => {
    const patient = await makePatient(therapist)
    for (const version of [1, 2]) await therapist.client.patch(`/api/patients/${patient.id}`, { heightCm: 150 + version }, { ifMatch: version })
    expect(expectBody(await therapist.client.patch(`/api/patients/${patient.id}`, { heightCm: 160 }, { ifMatch }), 200, PatientSchema).version).toBe(4)
  })

  it('answers 428 without a version', async () => {
    const patient = await makePatient(therapist)
    expectError(await therapist.client.patch(`/api/patients/${patient.id}`, { heightCm: 170 }), 428, 'version-required')
  })

  it.each(['1', '3', '"1"', 'W/"2"', '*', 'two', '', '99999999999'])('answers 412 with the present state for the version %s of a patient at 2', async (ifMatch) => {
    const patient = await makePatient(therapist)
    const second = expectBody(await therapist.client.patch(`/api/patients/${patient.id}`, { heightCm: 171 }, { ifMatch: 1 }), 200, PatientSchema)
    const { current } = expectError(await therapist.client.patch(`/api/patients/${patient.id}`, { heightCm: 172 }, { ifMatch }), 412, 'stale-version')
    expect(current).toEqual(second)
    expect(expectBody(await therapist.client.get(`/api/patients/${patient.id}`), 200, ChartSchema).heightCm).toBe(171)
  })

  it('lets one of two people who change the same version win and shows the other what is kept', async () => {
    const patient = await makePatient(therapist)
    await therapist.client.post(`/api/patients/${patient.id}/care-team`, { userId: colleague.id })
    const answers = await Promise.all([[therapist, 181], [colleague, 182]].map(([person, heightCm]) =>
      typeof person === 'object' ? person.client.patch(`/api/patients/${patient.id}`, { heightCm }, { ifMatch: 1 }) : Promise.reject(new Error('not a person'))))
    expect(answers.map(answer => answer.status).sort()).toEqual([200, 412])
  })

  it('answers 409 at the field for a record number that is taken', async () => {
    const [first, second] = [await makePatient(therapist), await makePatient(therapist)]
    const answer = await therapist.client.patch(`/api/patients/${second.id}`, { recordNumber: first.recordNumber }, { ifMatch: 1 })
    expect(expectError(answer, 409, 'record-number-taken').issues).toEqual([{ path: 'recordNumber', message: 'taken' }])
  })

  it.each([
    ['nothing to change', {}, ''], ['an unknown key', { nickname: 'x' }, ''], ['a version in the body', { version: 9 }, ''], ['a clinic', { clinicId: ABSENT }, ''],
    ['an empty name', { name: '' }, 'name'], ['a removed name', { name: null }, 'name'], ['a NUL character', { recordNumber: '\u0000' }, 'recordNumber'],
  ])('answers 400 for %s', async (_what, fields, path) => {
    const patient = await makePatient(therapist)
    expectIssueAt(await therapist.client.patch(`/api/patients/${patient.id}`, fields, { ifMatch: 1 }), path)
  })

  it('answers 401, 403 and 404', async () => {
    const patient = await makePatient(therapist)
    const send = (client: typeof therapist.client) => client.patch(`/api/patients/${patient.id}`, { heightCm: 150 }, { ifMatch: 1 })
    expectError(await send(createClient()), 401, 'not-signed-in')
    expectError(await send((await makeAdministrator(clinic)).client), 403, 'not-allowed')
    expectError(await send(colleague.client), 404, 'patient-not-found')
    expectError(await send(stranger.client), 404, 'patient-not-found')
  })

  it('tells someone who may not see the patient nothing about its version', async () => {
    const patient = await makePatient(therapist)
    expectError(await colleague.client.patch(`/api/patients/${patient.id}`, { heightCm: 150 }, { ifMatch: 77 }), 404, 'patient-not-found')
  })
})

describe('text that people type', () => {
  it('comes back as it was typed, whatever the script', async () => {
    const name = `${unique('Zoë')} 张伟 \u200dनेहा 👩🏽‍⚕️ O'Neil; DROP TABLE patient`
    const patient = await makePatient(therapist, { name, notes: 'a > b\r\nknee flexion <5° {{x}} ${y}' })
    expect(patient).toMatchObject({ name, notes: 'a > b\r\nknee flexion <5° {{x}} ${y}' })
  })
})
