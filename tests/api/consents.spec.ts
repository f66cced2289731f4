import { afterAll, describe, expect, it } from 'vitest'
import { ConsentSchema } from '#shared/schemas/consent'
import { ChartSchema } from '#shared/schemas/patient'
import { comparable, expectBody, expectError, expectIssueAt } from '../fixtures/api/answers'
import { createClient } from '../fixtures/api/client'
import { auditOf, closeDatabase, query, refusalOf } from '../fixtures/api/database'
import { makeAdministrator, makeClinic, makeStudent, makeTherapist } from '../fixtures/api/people'
import { makeConsent, makePatient } from '../fixtures/api/records'

afterAll(closeDatabase)

const clinic = await makeClinic('consents')
const therapist = await makeTherapist(clinic, 'Tove Marchetti')
const colleague = await makeTherapist(clinic, 'Una Colleague')
const stranger = await makeTherapist(await makeClinic('consents-elsewhere'))
const BODY = { kind: 'recording', givenOn: '2026-11-01', givenBy: 'Ines Sandqvist' }
const ABSENT = '01900000-0000-7000-8000-000000000000'

describe('POST /api/patients/:id/consents', () => {
  it('records who gave what on which day, and writes an audit row without names', async () => {
    const patient = await makePatient(therapist)
    const answer = await therapist.client.post(`/api/patients/${patient.id}/consents`, { ...BODY, kind: 'teaching', givenByRelation: 'guardian', note: 'Signed on paper,\nfiled in the chart' })
    const consent = expectBody(answer, 201, ConsentSchema)
    expect(consent).toEqual({
      id: expect.any(String), patientId: patient.id, kind: 'teaching', givenOn: '2026-11-01', givenBy: 'Ines Sandqvist', givenByRelation: 'guardian',
      note: 'Signed on paper,\nfiled in the chart', recordedBy: 'Tove Marchetti', createdAt: expect.any(String), withdrawnAt: null, withdrawnBy: null,
    })
    const rows = await auditOf(clinic.id, { requestId: answer.headers.get('x-request-id') ?? '' })
    expect(rows).toMatchObject([{ action: 'consent.give', actor_id: therapist.id, target_id: consent.id, patient_id: patient.id, after: { kind: 'teaching' } }])
    expect(JSON.stringify(rows)).not.toContain('Sandqvist')
  })

  it('takes the person themselves for the giver when nothing else is said', async () => {
    expect(await makeConsent(therapist, (await makePatient(therapist)).id)).toMatchObject({ givenByRelation: 'self', note: null })
  })

  it.each([
    ['no kind', { kind: undefined }, 'kind'], ['an unknown kind', { kind: 'marketing' }, 'kind'], ['no day', { givenOn: undefined }, 'givenOn'],
    ['a day that does not exist', { givenOn: '2026-11-31' }, 'givenOn'], ['nobody', { givenBy: ' ' }, 'givenBy'], ['a NUL character', { givenBy: 'A\u0000' }, 'givenBy'],
    ['an unknown relation', { givenByRelation: 'neighbour' }, 'givenByRelation'], ['a note of 1001 characters', { note: 'x'.repeat(1001) }, 'note'],
    ['a withdrawal', { withdrawnAt: '2026-11-01T00:00:00Z' }, ''], ['a recorder', { recordedBy: ABSENT }, ''],
  ])('answers 400 naming the field for %s', async (_what, fields, path) => {
    const patient = await makePatient(therapist)
    expectIssueAt(await therapist.client.post(`/api/patients/${patient.id}/consents`, { ...BODY, ...fields }), path)
  })

  it('answers 401, 403 and 404', async () => {
    const patient = await makePatient(therapist)
    const send = (client: typeof therapist.client) => client.post(`/api/patients/${patient.id}/consents`, BODY)
    expectError(await send(createClient()), 401, 'not-signed-in')
    expectError(await send((await makeAdministrator(clinic)).client), 403, 'not-allowed')
    expectError(await send((await makeStudent(clinic)).client), 403, 'not-allowed')
    expectError(await send(colleague.client), 404, 'patient-not-found')
    expectError(await send(stranger.client), 404, 'patient-not-found')
  })
})

describe('DELETE /api/consents/:id', () => {
  it('withdraws, keeps the record with who and when, and writes an audit row', async () => {
    const patient = await makePatient(therapist)
    await therapist.client.post(`/api/patients/${patient.id}/care-team`, { userId: colleague.id })
    const given = await makeConsent(therapist, patient.id)
    const answer = await colleague.client.delete(`/api/consents/${given.id}`)
    const withdrawn = expectBody(answer, 200, ConsentSchema)
    expect(withdrawn).toEqual({ ...given, withdrawnAt: expect.any(String), withdrawnBy: 'Una Colleague' })
    expect(expectBody(await therapist.client.get(`/api/patients/${patient.id}`), 200, ChartSchema).consents).toEqual([withdrawn])
    expect(await auditOf(clinic.id, { requestId: answer.headers.get('x-request-id') ?? '' }))
      .toMatchObject([{ action: 'consent.withdraw', actor_id: colleague.id, target_id: given.id, patient_id: patient.id }])
  })

  it('answers 409 the second time, and to all but one of parallel withdrawals', async () => {
    const patient = await makePatient(therapist)
    const given = await makeConsent(therapist, patient.id)
    const answers = await Promise.all([1, 2, 3, 4].map(() => therapist.client.delete(`/api/consents/${given.id}`)))
    expect(answers.map(answer => answer.status).sort()).toEqual([200, 409, 409, 409])
    expectError(await therapist.client.delete(`/api/consents/${given.id}`), 409, 'consent-withdrawn')
    expect((await auditOf(clinic.id, { action: 'consent.withdraw' })).filter(row => row.target_id === given.id)).toHaveLength(1)
  })

  it('lets a new consent be given after a withdrawal, beside the old record', async () => {
    const patient = await makePatient(therapist)
    const first = await makeConsent(therapist, patient.id)
    await therapist.client.delete(`/api/consents/${first.id}`)
    const second = await makeConsent(therapist, patient.id)
    const { consents } = expectBody(await therapist.client.get(`/api/patients/${patient.id}`), 200, ChartSchema)
    expect(consents.map(consent => [consent.id, consent.withdrawnAt !== null])).toEqual([[second.id, false], [first.id, true]])
  })

  it('answers the same 404 for an absent one, another team\'s, another clinic\'s and a malformed id', async () => {
    const given = await makeConsent(therapist, (await makePatient(therapist)).id)
    const answers = [
      await therapist.client.delete(`/api/consents/${ABSENT}`), await colleague.client.delete(`/api/consents/${given.id}`),
      await stranger.client.delete(`/api/consents/${given.id}`), await therapist.client.delete('/api/consents/last'),
    ]
    for (const answer of answers) expectError(answer, 404, 'consent-not-found')
    expect(new Set(answers.map(answer => JSON.stringify(comparable(answer)))).size).toBe(1)
    const [row] = await query<{ withdrawn_at: Date | null }>(clinic.id, 'select withdrawn_at from consent where id = $1', [given.id])
    expect(row?.withdrawn_at).toBeNull()
  })

  it('answers 401 and 403', async () => {
    const given = await makeConsent(therapist, (await makePatient(therapist)).id)
    expectError(await createClient().delete(`/api/consents/${given.id}`), 401, 'not-signed-in')
    expectError(await (await makeAdministrator(clinic)).client.delete(`/api/consents/${given.id}`), 403, 'not-allowed')
  })
})

describe('the record of a consent', () => {
  it('is not rewritten or deleted in the database, by the server or by the owner', async () => {
    const given = await makeConsent(therapist, (await makePatient(therapist)).id)
    for (const as of ['app', 'owner'] as const) {
      expect(await refusalOf({ as, clinicId: clinic.id }, 'update consent set given_by = \'Someone Else\' where id = $1', [given.id])).toBe('23001')
      expect(await refusalOf({ as, clinicId: clinic.id }, 'update consent set kind = \'teaching\' where id = $1', [given.id])).toBe('23001')
      expect(['23001', '42501']).toContain(await refusalOf({ as, clinicId: clinic.id }, 'delete from consent where id = $1', [given.id]))
    }
    await therapist.client.delete(`/api/consents/${given.id}`)
    for (const as of ['app', 'owner'] as const) {
      expect(await refusalOf({ as, clinicId: clinic.id }, 'update consent set withdrawn_at = null, withdrawn_by_id = null where id = $1', [given.id])).toBe('23001')
    }
  })
})
