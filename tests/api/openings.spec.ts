import { afterAll, describe, expect, it } from 'vitest'
import { ChartSchema, OpeningSchema } from '#shared/schemas/patient'
import { comparable, expectBody, expectError, expectIssueAt } from '../fixtures/api/answers'
import { createClient } from '../fixtures/api/client'
import { auditOf, closeDatabase, query } from '../fixtures/api/database'
import { makeAdministrator, makeClinic, makeStudent, makeTherapist } from '../fixtures/api/people'
import { makePatient, makeSession } from '../fixtures/api/records'

afterAll(closeDatabase)

const clinic = await makeClinic('openings')
const therapist = await makeTherapist(clinic)
const covering = await makeTherapist(clinic)
const stranger = await makeTherapist(await makeClinic('openings-elsewhere'))
const REASON = 'Covering for a colleague who is ill today'
const ABSENT = '01900000-0000-7000-8000-000000000000'

/** Moves an opening back in time, as waiting would. */
function waitMinutes(openingId: string, minutes: number) {
  return query(clinic.id, 'update chart_opening set opened_at = opened_at - make_interval(mins => $2), expires_at = expires_at - make_interval(mins => $2) where id = $1', [openingId, minutes])
}

async function hasEnded(openingId: string, patientId: string) {
  await waitMinutes(openingId, 59)
  expect((await covering.client.get(`/api/patients/${patientId}`)).status).toBe(200)
  await waitMinutes(openingId, 2)
  return (await covering.client.get(`/api/patients/${patientId}`)).status
}

describe('POST /api/patients/:id/openings', () => {
  it('gives access for sixty minutes and not longer', async () => {
    const patient = await makePatient(therapist)
    const session = await makeSession(therapist, patient.id)
    expectError(await covering.client.get(`/api/patients/${patient.id}`), 404, 'patient-not-found')
    const opening = expectBody(await covering.client.post(`/api/patients/${patient.id}/openings`, { reason: `  ${REASON} ` }), 201, OpeningSchema)
    expect(opening).toMatchObject({ patientId: patient.id, reason: REASON })
    expect(Math.abs(Date.parse(opening.expiresAt) - Date.now() - 3_600_000)).toBeLessThan(20_000)
    const chart = expectBody(await covering.client.get(`/api/patients/${patient.id}`), 200, ChartSchema)
    expect(chart.access).toEqual({ kind: 'opening', expiresAt: opening.expiresAt })
    expect(chart.careTeam.map(member => member.userId)).toEqual([therapist.id])
    expect((await covering.client.get(`/api/sessions/${session.id}`)).status).toBe(200)
    expect(await hasEnded(opening.id, patient.id)).toBe(404)
    expectError(await covering.client.get(`/api/sessions/${session.id}`), 404, 'session-not-found')
    expectError(await covering.client.get(`/api/patients/${patient.id}/timeline`), 404, 'patient-not-found')
  })

  it('opens the chart to the one who asked and to nobody else', async () => {
    const patient = await makePatient(therapist)
    await covering.client.post(`/api/patients/${patient.id}/openings`, { reason: REASON })
    expectError(await (await makeTherapist(clinic)).client.get(`/api/patients/${patient.id}`), 404, 'patient-not-found')
  })

  it('audits the opening with its reason', async () => {
    const patient = await makePatient(therapist)
    const answer = await covering.client.post(`/api/patients/${patient.id}/openings`, { reason: REASON })
    expect(await auditOf(clinic.id, { requestId: answer.headers.get('x-request-id') ?? '' }))
      .toMatchObject([{ action: 'patient.open-with-reason', actor_id: covering.id, patient_id: patient.id, reason: REASON }])
  })

  it('lets an administrator look, and change nothing', async () => {
    const patient = await makePatient(therapist)
    const administrator = await makeAdministrator(clinic)
    await administrator.client.post(`/api/patients/${patient.id}/openings`, { reason: REASON })
    expect((await administrator.client.get(`/api/patients/${patient.id}`)).status).toBe(200)
    expect((await administrator.client.get(`/api/patients/${patient.id}/timeline`)).status).toBe(200)
    expectError(await administrator.client.patch(`/api/patients/${patient.id}`, { heightCm: 170 }, { ifMatch: 1 }), 403, 'not-allowed')
  })

  it.each([
    ['no reason', {}, 'reason'], ['an empty one', { reason: '' }, 'reason'], ['nine characters', { reason: '123456789' }, 'reason'],
    ['ten characters that are mostly blanks', { reason: '  short   ' }, 'reason'], ['501 characters', { reason: 'x'.repeat(501) }, 'reason'],
    ['a NUL character', { reason: 'long enough \u0000 reason' }, 'reason'], ['a longer time', { reason: REASON, minutes: 600 }, ''],
  ])('answers 400 for %s, and opens nothing', async (_what, body, path) => {
    const patient = await makePatient(therapist)
    expectIssueAt(await covering.client.post(`/api/patients/${patient.id}/openings`, body), path)
    expectError(await covering.client.get(`/api/patients/${patient.id}`), 404, 'patient-not-found')
  })

  it('takes exactly ten characters', async () => {
    const patient = await makePatient(therapist)
    expect((await covering.client.post(`/api/patients/${patient.id}/openings`, { reason: '1234567890' })).status).toBe(201)
  })

  it('answers the same 404 for another clinic\'s patient as for an absent one', async () => {
    const patient = await makePatient(therapist)
    const answers = [patient.id, ABSENT, 'nobody'].map(id => stranger.client.post(`/api/patients/${id}/openings`, { reason: REASON }))
    const bodies = (await Promise.all(answers)).map((answer) => {
      expectError(answer, 404, 'patient-not-found')
      return JSON.stringify(comparable(answer))
    })
    expect(new Set(bodies).size).toBe(1)
  })

  it('answers 401 and 403', async () => {
    const patient = await makePatient(therapist)
    expectError(await createClient().post(`/api/patients/${patient.id}/openings`, { reason: REASON }), 401, 'not-signed-in')
    expectError(await (await makeStudent(clinic)).client.post(`/api/patients/${patient.id}/openings`, { reason: REASON }), 403, 'not-allowed')
  })
})

describe('POST /api/openings', () => {
  it('opens a chart by the record number as it stands on paper', async () => {
    const patient = await makePatient(therapist)
    const answer = await covering.client.post('/api/openings', { recordNumber: patient.recordNumber, reason: REASON })
    const opening = expectBody(answer, 201, OpeningSchema)
    expect(opening.patientId).toBe(patient.id)
    expect((await covering.client.get(`/api/patients/${patient.id}`)).status).toBe(200)
    expect(await auditOf(clinic.id, { requestId: answer.headers.get('x-request-id') ?? '' }))
      .toMatchObject([{ action: 'patient.open-with-reason', actor_id: covering.id, patient_id: patient.id, reason: REASON }])
  })

  it('finds no part of a number and no number of another clinic', async () => {
    const patient = await makePatient(therapist)
    const elsewhere = await makePatient(stranger)
    for (const recordNumber of [patient.recordNumber.slice(0, -1), '%', `${patient.recordNumber}%`, elsewhere.recordNumber]) {
      expectError(await covering.client.post('/api/openings', { recordNumber, reason: REASON }), 404, 'patient-not-found')
    }
  })

  it('answers 400 without a reason or a number', async () => {
    const patient = await makePatient(therapist)
    expectIssueAt(await covering.client.post('/api/openings', { recordNumber: patient.recordNumber }), 'reason')
    expectIssueAt(await covering.client.post('/api/openings', { recordNumber: patient.recordNumber, reason: 'too short' }), 'reason')
    expectIssueAt(await covering.client.post('/api/openings', { reason: REASON }), 'recordNumber')
    expectIssueAt(await covering.client.post('/api/openings', { recordNumber: 'A\u0000', reason: REASON }), 'recordNumber')
  })

  it('answers 401 and 403', async () => {
    expectError(await createClient().post('/api/openings', { recordNumber: 'x', reason: REASON }), 401, 'not-signed-in')
    expectError(await (await makeStudent(clinic)).client.post('/api/openings', { recordNumber: 'x', reason: REASON }), 403, 'not-allowed')
  })
})
