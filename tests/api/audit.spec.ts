import { afterAll, describe, expect, it } from 'vitest'
import { AuditListSchema } from '#shared/schemas/audit'
import { ChartSchema } from '#shared/schemas/patient'
import { expectBody, expectError, expectIssueAt } from '../fixtures/api/answers'
import { createClient } from '../fixtures/api/client'
import { auditOf, closeDatabase, query, refusalOf, withFault } from '../fixtures/api/database'
import { makeAdministrator, makeClinic, makePatientAccount, makeStudent, makeTherapist } from '../fixtures/api/people'
import { makePatient, makeSession, patientBody } from '../fixtures/api/records'

afterAll(closeDatabase)

const clinic = await makeClinic('audit')
const therapist = await makeTherapist(clinic, 'Tove Marchetti')
const administrator = await makeAdministrator(clinic)
const elsewhere = await makeTherapist(await makeClinic('audit-elsewhere'))
const elsewherePatient = await makePatient(elsewhere)

const list = async (text = '') => expectBody(await administrator.client.get(`/api/audit${text}`), 200, AuditListSchema)

describe('GET /api/audit', () => {
  it('shows who did what to which record, in which request, newest first', async () => {
    const patient = await makePatient(therapist)
    const opened = await therapist.client.get(`/api/patients/${patient.id}`)
    const { items } = await list(`?patientId=${patient.id}`)
    expect(items.map(item => item.action)).toEqual(['patient.open', 'patient.create'])
    expect(items[0]).toEqual({
      id: expect.any(String), at: expect.stringMatching(/Z$/), actorId: therapist.id, actorName: 'Tove Marchetti', action: 'patient.open', targetType: 'patient', targetId: patient.id,
      patientId: patient.id, requestId: opened.headers.get('x-request-id'), reason: null, before: null, after: null,
    })
  })

  it('narrows to a patient, an actor and a period', async () => {
    const person = await makeTherapist(clinic)
    const patient = await makePatient(person)
    await makeSession(therapist, (await makePatient(therapist)).id)
    const all = await list(`?actorId=${person.id}`)
    expect(new Set(all.items.map(item => item.actorId))).toEqual(new Set([person.id]))
    expect(all.items.map(item => item.action)).toEqual(['patient.create', 'account.sign-in'])
    expect((await list(`?actorId=${person.id}&patientId=${patient.id}`)).items.map(item => item.action)).toEqual(['patient.create'])
    const at = all.items[0]?.at ?? ''
    expect((await list(`?actorId=${person.id}&from=${at}`)).items.map(item => item.action)).toEqual(['patient.create'])
    expect((await list(`?actorId=${person.id}&to=${new Date(Date.parse(at) - 1).toISOString()}`)).items.map(item => item.action)).toEqual(['account.sign-in'])
    expect((await list(`?actorId=${person.id}&from=2999-01-01T00:00:00Z`)).total).toBe(0)
  })

  it('shows nothing of another clinic, also when asked for its people and patients', async () => {
    expect((await list(`?actorId=${elsewhere.id}`)).items).toEqual([])
    expect((await list(`?patientId=${elsewherePatient.id}`)).items).toEqual([])
    const { items } = await list('?pageSize=200')
    expect(items.some(item => item.actorId === elsewhere.id)).toBe(false)
  })

  it('pages without losing or repeating a line', async () => {
    const patient = await makePatient(therapist)
    for (let visit = 0; visit < 6; visit++) await therapist.client.get(`/api/patients/${patient.id}`)
    const pages = await Promise.all([1, 2, 3].map(page => list(`?patientId=${patient.id}&pageSize=3&page=${page}`)))
    expect(pages.map(page => page.items.length)).toEqual([3, 3, 1])
    expect(pages.map(page => page.total)).toEqual([7, 7, 7])
    expect(new Set(pages.flatMap(page => page.items.map(item => item.id))).size).toBe(7)
  })

  it.each([['pageSize=0', 'pageSize'], ['pageSize=201', 'pageSize'], ['page=0', 'page'], ['patientId=all', 'patientId'], ['actorId=1', 'actorId'], ['from=monday', 'from'], ['action=patient.open', '']])('answers 400 for ?%s', async (text, path) => {
    expectIssueAt(await administrator.client.get(`/api/audit?${text}`), path)
  })

  it('is for administrators alone', async () => {
    expectError(await createClient().get('/api/audit'), 401, 'not-signed-in')
    const patient = await makePatient(therapist)
    for (const person of [therapist, await makeStudent(clinic), await makePatientAccount(clinic, patient.id)]) expectError(await person.client.get('/api/audit'), 403, 'not-allowed')
  })
})

describe('the audit trail', () => {
  it('is not changed, deleted or emptied, by the server\'s role or by the owner', async () => {
    for (const as of ['app', 'owner'] as const) {
      for (const statement of ['update audit_event set action = \'nothing\'', 'delete from audit_event', 'truncate audit_event', 'truncate audit_event cascade']) {
        expect(await refusalOf({ as, clinicId: clinic.id }, statement), `${as}: ${statement}`).toBe(as === 'app' ? '42501' : '23001')
      }
      expect(await refusalOf({ as }, 'truncate audit_event')).toBe(as === 'app' ? '42501' : '23001')
    }
  })

  it('keeps its trigger out of the server role\'s reach', async () => {
    for (const statement of ['alter table audit_event disable trigger all', 'drop trigger audit_event_append_only on audit_event', 'set session_replication_role = replica', 'drop table audit_event']) {
      expect(await refusalOf({ as: 'app', clinicId: clinic.id }, statement), statement).toBe('42501')
    }
  })

  it('has no line of a change that was refused', async () => {
    const patient = await makePatient(therapist)
    const answer = await therapist.client.patch(`/api/patients/${patient.id}`, { heightCm: 170 }, { ifMatch: 5 })
    expect(answer.status).toBe(412)
    expect(await auditOf(clinic.id, { requestId: answer.headers.get('x-request-id') ?? '' })).toEqual([])
  })

  it('exists together with the change or not at all: where it cannot be written, nothing is changed and nothing is shown', async () => {
    const patient = await makePatient(therapist)
    const body = patientBody({ name: 'Never Kept' })
    await withFault('audit_event', `new.clinic_id = '${clinic.id}'`, async () => {
      for (const answer of [await therapist.client.post('/api/patients', body), await therapist.client.get(`/api/patients/${patient.id}`), await therapist.client.patch(`/api/patients/${patient.id}`, { heightCm: 111 }, { ifMatch: 1 })]) {
        expectError(answer, 500, 'internal')
        expect(answer.text).not.toContain(patient.name)
      }
    })
    expect(await query(clinic.id, 'select id from patient where name = $1', ['Never Kept'])).toEqual([])
    expect(expectBody(await therapist.client.get(`/api/patients/${patient.id}`), 200, ChartSchema)).toMatchObject({ version: 1, heightCm: patient.heightCm })
  })
})
