import { afterAll, describe, expect, it } from 'vitest'
import { PatientSchema } from '#shared/schemas/patient'
import { SessionSchema } from '#shared/schemas/session'
import { expectBody, expectError, expectIssueAt } from '../fixtures/api/answers'
import { auditOf, closeDatabase, query } from '../fixtures/api/database'
import { SAGITTAL_BODY } from '../fixtures/api/marking-bodies'
import { makeClinic, makeTherapist, unique } from '../fixtures/api/people'
import { boutBody, makePatient, makeSession, makeStill, patientBody } from '../fixtures/api/records'

afterAll(closeDatabase)

const clinic = await makeClinic('idempotency')
const therapist = await makeTherapist(clinic)
const colleague = await makeTherapist(clinic)
const BODY = { startedAt: '2026-11-02T09:00:00Z' }

const start = (patientId: string, idempotencyKey: string, body: unknown = BODY, by = therapist) => by.client.post(`/api/patients/${patientId}/sessions`, body, { idempotencyKey })

async function countSessions(patientId: string): Promise<number> {
  const [row] = await query<{ count: number }>(clinic.id, 'select count(*)::int as count from session where patient_id = $1', [patientId])
  return row?.count ?? Number.NaN
}

describe('Idempotency-Key', () => {
  it('gives the first answer again for the same key and body, with one row and one audit line', async () => {
    const patient = await makePatient(therapist)
    const key = unique('key')
    const [first, again] = [await start(patient.id, key), await start(patient.id, key)]
    expectBody(first, 201, SessionSchema)
    expect(again.status).toBe(201)
    expect(again.json).toEqual(first.json)
    expect(again.headers.get('etag')).toBe(first.headers.get('etag'))
    expect(await countSessions(patient.id)).toBe(1)
    expect((await auditOf(clinic.id, { action: 'session.create' })).filter(row => row.patient_id === patient.id)).toHaveLength(1)
  })

  it('gives the first answer also after the record went on', async () => {
    const key = unique('key')
    const body = patientBody()
    const create = () => therapist.client.post('/api/patients', body, { idempotencyKey: key })
    const first = expectBody(await create(), 201, PatientSchema)
    await therapist.client.patch(`/api/patients/${first.id}`, { heightCm: 199 }, { ifMatch: 1 })
    expect(expectBody(await create(), 201, PatientSchema)).toEqual(first)
  })

  it('answers 422 for another body, to the byte', async () => {
    const patient = await makePatient(therapist)
    const key = unique('key')
    await start(patient.id, key)
    expectError(await start(patient.id, key, { ...BODY, notes: 'other' }), 422, 'idempotency-mismatch')
    expect(await countSessions(patient.id)).toBe(1)
  })

  it('lets one of twenty parallel requests have an effect; the others get its answer or 409', async () => {
    const patient = await makePatient(therapist)
    const key = unique('key')
    const answers = await Promise.all(Array.from({ length: 20 }, () => start(patient.id, key)))
    const done = answers.filter(answer => answer.status === 201)
    expect(done.length).toBeGreaterThan(0)
    expect(new Set(done.map(answer => JSON.stringify(answer.json))).size).toBe(1)
    for (const answer of answers.filter(({ status }) => status !== 201)) {
      expectError(answer, 409, 'request-in-flight')
      expect(answer.headers.get('retry-after')).toMatch(/^\d+$/)
    }
    expect(await countSessions(patient.id)).toBe(1)
  })

  it('belongs to one person', async () => {
    const patient = await makePatient(therapist)
    await therapist.client.post(`/api/patients/${patient.id}/care-team`, { userId: colleague.id })
    const key = unique('key')
    const mine = expectBody(await start(patient.id, key), 201, SessionSchema)
    const theirs = expectBody(await start(patient.id, key, BODY, colleague), 201, SessionSchema)
    expect(theirs.id).not.toBe(mine.id)
    expect(await countSessions(patient.id)).toBe(2)
  })

  it('belongs to one route and record', async () => {
    const [one, two] = [await makePatient(therapist), await makePatient(therapist)]
    const key = unique('key')
    const first = expectBody(await start(one.id, key), 201, SessionSchema)
    const second = expectBody(await start(two.id, key), 201, SessionSchema)
    expect(second).toMatchObject({ patientId: two.id })
    expect((await therapist.client.post(`/api/sessions/${first.id}/bouts`, boutBody(), { idempotencyKey: key })).status).toBe(201)
  })

  it('is free again after a refusal, so that the next try can succeed', async () => {
    const taken = await makePatient(therapist)
    const key = unique('key')
    const body = patientBody({ recordNumber: taken.recordNumber })
    const create = () => therapist.client.post('/api/patients', body, { idempotencyKey: key })
    expectError(await create(), 409, 'record-number-taken')
    await therapist.client.patch(`/api/patients/${taken.id}`, { recordNumber: unique('R') }, { ifMatch: 1 })
    expectBody(await create(), 201, PatientSchema)
  })

  it('is forgotten after 24 hours and not before', async () => {
    const patient = await makePatient(therapist)
    const key = unique('key')
    const age = (hours: number) => query(clinic.id, 'update idempotency_key set created_at = created_at - make_interval(hours => $2) where key = $1', [key, hours])
    const first = expectBody(await start(patient.id, key), 201, SessionSchema)
    await age(23)
    expect(expectBody(await start(patient.id, key), 201, SessionSchema).id).toBe(first.id)
    await age(2)
    expect(expectBody(await start(patient.id, key), 201, SessionSchema).id).not.toBe(first.id)
    expect(await countSessions(patient.id)).toBe(2)
  })

  it('whose request died half way is free again after a minute', async () => {
    const patient = await makePatient(therapist)
    const key = unique('key')
    await start(patient.id, key)
    await query(clinic.id, 'update idempotency_key set status = null, answer = null where key = $1', [key])
    expectError(await start(patient.id, key), 409, 'request-in-flight')
    await query(clinic.id, 'update idempotency_key set created_at = now() - interval \'61 seconds\' where key = $1', [key])
    expect((await start(patient.id, key)).status).toBe(201)
  })

  it('works for every kind of record that is created', async () => {
    const patient = await makePatient(therapist)
    const session = await makeSession(therapist, patient.id)
    const { stillId } = await makeStill(therapist, session)
    const requests: [string, unknown][] = [
      ['/api/patients', patientBody()],
      [`/api/patients/${patient.id}/care-team`, { userId: colleague.id }],
      [`/api/patients/${patient.id}/consents`, { kind: 'recording', givenOn: '2026-11-01', givenBy: 'Ines Sandqvist' }],
      [`/api/patients/${patient.id}/openings`, { reason: 'Covering for a colleague' }],
      ['/api/openings', { recordNumber: patient.recordNumber, reason: 'Covering for a colleague' }],
      [`/api/patients/${patient.id}/sessions`, BODY],
      [`/api/sessions/${session.id}/bouts`, boutBody()],
      [`/api/stills/${stillId}/markings`, { ...SAGITTAL_BODY, status: 'final' }],
    ]
    for (const [path, body] of requests) {
      const key = unique('key')
      const [first, again] = [await therapist.client.post(path, body, { idempotencyKey: key }), await therapist.client.post(path, body, { idempotencyKey: key })]
      expect([first.status, again.status], path).toEqual([201, 201])
      expect(again.json, path).toEqual(first.json)
    }
  })

  it('answers 400 for a key that is empty, too long or not printable', async () => {
    const patient = await makePatient(therapist)
    for (const key of ['x'.repeat(201), 'two words', 'schlüssel']) {
      expectIssueAt(await start(patient.id, key), 'Idempotency-Key')
    }
    expect(await countSessions(patient.id)).toBe(0)
  })

  it('is looked at after the role and after the input', async () => {
    const patient = await makePatient(therapist)
    const key = unique('key')
    expectIssueAt(await start(patient.id, key, {}), 'startedAt')
    expectBody(await start(patient.id, key), 201, SessionSchema)
  })
})
