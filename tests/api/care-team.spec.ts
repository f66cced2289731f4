import { afterAll, describe, expect, it } from 'vitest'
import { CareTeamMemberSchema, ChartSchema } from '#shared/schemas/patient'
import { comparable, expectBody, expectError, expectIssueAt } from '../fixtures/api/answers'
import { createClient } from '../fixtures/api/client'
import { auditOf, closeDatabase, query } from '../fixtures/api/database'
import { makeAccount, makeAdministrator, makeClinic, makeStudent, makeTherapist } from '../fixtures/api/people'
import { makePatient } from '../fixtures/api/records'

afterAll(closeDatabase)

const clinic = await makeClinic('care-team')
const therapist = await makeTherapist(clinic, 'Tove Marchetti')
const colleague = await makeTherapist(clinic, 'Una Colleague')
const stranger = await makeTherapist(await makeClinic('care-team-elsewhere'))
const ABSENT = '01900000-0000-7000-8000-000000000000'

function join(patientId: string, userId: string, by = therapist) {
  return by.client.post(`/api/patients/${patientId}/care-team`, { userId })
}

async function teamOf(patientId: string) {
  const chart = expectBody(await therapist.client.get(`/api/patients/${patientId}`), 200, ChartSchema)
  return chart.careTeam.map(member => member.userId)
}

describe('POST /api/patients/:id/care-team', () => {
  it('lets a therapist of the clinic reach the chart, and writes an audit row', async () => {
    const patient = await makePatient(therapist)
    expectError(await colleague.client.get(`/api/patients/${patient.id}`), 404, 'patient-not-found')
    const answer = await join(patient.id, colleague.id)
    expect(expectBody(answer, 201, CareTeamMemberSchema)).toEqual({ userId: colleague.id, name: 'Una Colleague', joinedAt: expect.any(String) })
    expect((await colleague.client.get(`/api/patients/${patient.id}`)).status).toBe(200)
    expect(await auditOf(clinic.id, { requestId: answer.headers.get('x-request-id') ?? '' }))
      .toMatchObject([{ action: 'care-team.join', actor_id: therapist.id, target_id: colleague.id, patient_id: patient.id }])
  })

  it('answers 409 for someone who is on the team already', async () => {
    const patient = await makePatient(therapist)
    expectError(await join(patient.id, therapist.id), 409, 'already-on-care-team')
    const answers = await Promise.all([1, 2, 3, 4].map(() => join(patient.id, colleague.id)))
    expect(answers.map(answer => answer.status).sort()).toEqual([201, 409, 409, 409])
  })

  it('answers the same 404 for nobody, someone of another clinic, a closed account and people who are no therapists', async () => {
    const patient = await makePatient(therapist)
    const closed = await makeAccount(clinic, ['therapist'])
    await query(clinic.id, 'update user_account set disabled_at = now() where id = $1', [closed.id])
    const people = [ABSENT, stranger.id, closed.id, (await makeStudent(clinic)).id, (await makeAdministrator(clinic)).id]
    const answers = await Promise.all(people.map(userId => join(patient.id, userId)))
    for (const answer of answers) expectError(answer, 404, 'user-not-found')
    expect(new Set(answers.map(answer => JSON.stringify(comparable(answer)))).size).toBe(1)
    expect(await teamOf(patient.id)).toEqual([therapist.id])
  })

  it('answers 400 without a person, with a malformed one and with more than one key', async () => {
    const patient = await makePatient(therapist)
    const send = (body: unknown) => therapist.client.post(`/api/patients/${patient.id}/care-team`, body)
    expectIssueAt(await send({}), 'userId')
    expectIssueAt(await send({ userId: 'everyone' }), 'userId')
    expectIssueAt(await send({ userId: colleague.id, role: 'lead' }), '')
  })

  it('answers 401, 403 and 404', async () => {
    const patient = await makePatient(therapist)
    expectError(await createClient().post(`/api/patients/${patient.id}/care-team`, { userId: colleague.id }), 401, 'not-signed-in')
    expectError(await join(patient.id, colleague.id, await makeAdministrator(clinic)), 403, 'not-allowed')
    expectError(await join(patient.id, colleague.id, colleague), 404, 'patient-not-found')
    expectError(await join(patient.id, stranger.id, stranger), 404, 'patient-not-found')
  })
})

describe('DELETE /api/patients/:id/care-team/:userId', () => {
  it('takes the chart away from the next request on, and writes an audit row', async () => {
    const patient = await makePatient(therapist)
    await join(patient.id, colleague.id)
    expect((await colleague.client.get(`/api/patients/${patient.id}`)).status).toBe(200)
    const answer = await therapist.client.delete(`/api/patients/${patient.id}/care-team/${colleague.id}`)
    expect(answer.status).toBe(204)
    expect(answer.text).toBe('')
    expectError(await colleague.client.get(`/api/patients/${patient.id}`), 404, 'patient-not-found')
    expectError(await colleague.client.get(`/api/patients/${patient.id}/sessions`), 404, 'patient-not-found')
    expect(await auditOf(clinic.id, { requestId: answer.headers.get('x-request-id') ?? '' }))
      .toMatchObject([{ action: 'care-team.leave', actor_id: therapist.id, target_id: colleague.id, patient_id: patient.id }])
  })

  it('lets a person take themselves off', async () => {
    const patient = await makePatient(therapist)
    await join(patient.id, colleague.id)
    expect((await colleague.client.delete(`/api/patients/${patient.id}/care-team/${colleague.id}`)).status).toBe(204)
    expectError(await colleague.client.get(`/api/patients/${patient.id}`), 404, 'patient-not-found')
  })

  it('answers 409 for the last one: a chart nobody can reach would be lost', async () => {
    const patient = await makePatient(therapist)
    expectError(await therapist.client.delete(`/api/patients/${patient.id}/care-team/${therapist.id}`), 409, 'last-care-team-member')
    expect(await teamOf(patient.id)).toEqual([therapist.id])
  })

  it('leaves one on the team when two people take each other off at the same moment', async () => {
    const patient = await makePatient(therapist)
    await join(patient.id, colleague.id)
    const answers = await Promise.all([
      therapist.client.delete(`/api/patients/${patient.id}/care-team/${colleague.id}`),
      colleague.client.delete(`/api/patients/${patient.id}/care-team/${therapist.id}`),
    ])
    expect(answers.filter(answer => answer.status === 204)).toHaveLength(1)
    const [row] = await query<{ count: number }>(clinic.id, 'select count(*)::int as count from care_team_member where patient_id = $1', [patient.id])
    expect(row?.count).toBe(1)
  })

  it('answers 404 for someone who is not on the team, and for malformed ids', async () => {
    const patient = await makePatient(therapist)
    expectError(await therapist.client.delete(`/api/patients/${patient.id}/care-team/${colleague.id}`), 404, 'user-not-found')
    expectError(await therapist.client.delete(`/api/patients/${patient.id}/care-team/me`), 404, 'user-not-found')
    expectError(await therapist.client.delete(`/api/patients/x/care-team/${colleague.id}`), 404, 'patient-not-found')
  })

  it('answers 401, 403 and 404', async () => {
    const patient = await makePatient(therapist)
    const path = `/api/patients/${patient.id}/care-team/${therapist.id}`
    expectError(await createClient().delete(path), 401, 'not-signed-in')
    expectError(await (await makeStudent(clinic)).client.delete(path), 403, 'not-allowed')
    expectError(await colleague.client.delete(path), 404, 'patient-not-found')
    expectError(await stranger.client.delete(path), 404, 'patient-not-found')
    expect(await teamOf(patient.id)).toEqual([therapist.id])
  })
})
