import { afterAll, describe, expect, it } from 'vitest'
import { MemberListSchema } from '#shared/schemas/account'
import { expectBody, expectError, expectIssueAt } from '../fixtures/api/answers'
import { createClient } from '../fixtures/api/client'
import { closeDatabase, query } from '../fixtures/api/database'
import { makeAccount, makeAdministrator, makeClinic, makePatientAccount, makeStudent, makeTherapist } from '../fixtures/api/people'
import { makePatient } from '../fixtures/api/records'

afterAll(closeDatabase)

const clinic = await makeClinic('members')
const therapist = await makeTherapist(clinic, 'Tove Marchetti')
const colleague = await makeTherapist(clinic, 'Una Colleague')
const student = await makeStudent(clinic)
const administrator = await makeAdministrator(clinic)
const patientAccount = await makePatientAccount(clinic, (await makePatient(therapist)).id)
const both = await makeAccount(clinic, ['administrator', 'therapist'], { name: 'Bo Both' })
await makeTherapist(await makeClinic('members-elsewhere'), 'Someone Else')

const list = async (by: typeof therapist, text = '') => expectBody(await by.client.get(`/api/members${text}`), 200, MemberListSchema)
const ids = async (by: typeof therapist, text = '') => (await list(by, text)).items.map(item => item.id)

describe('GET /api/members', () => {
  it('shows a therapist the therapists, by name, and never who is a patient or a student here', async () => {
    expect(await ids(therapist)).toEqual([both.id, therapist.id, colleague.id])
    for (const role of ['patient', 'student', 'administrator']) expect(await ids(therapist, `?role=${role}`)).toEqual([both.id, therapist.id, colleague.id])
  })

  it('shows an administrator everybody of the clinic, or those of a role', async () => {
    expect((await ids(administrator)).sort()).toEqual([therapist.id, colleague.id, student.id, administrator.id, patientAccount.id, both.id].sort())
    expect(await ids(administrator, '?role=patient')).toEqual([patientAccount.id])
    expect((await ids(administrator, '?role=administrator')).sort()).toEqual([administrator.id, both.id].sort())
  })

  it('says who is closed, and tells no hash and no time', async () => {
    const closed = await makeAccount(clinic, ['therapist'], { name: 'Zz Closed' })
    await query(clinic.id, 'update user_account set disabled_at = now() where id = $1', [closed.id])
    const { items } = await list(administrator, '?role=therapist')
    expect(items.find(item => item.id === closed.id)).toEqual({ id: closed.id, name: 'Zz Closed', email: closed.email, roles: ['therapist'], isDisabled: true })
    expect(items.find(item => item.id === therapist.id)?.isDisabled).toBe(false)
  })

  it('pages', async () => {
    expect(await list(administrator, '?pageSize=2&page=2')).toMatchObject({ page: 2, pageSize: 2, items: [expect.anything(), expect.anything()] })
  })

  it.each([['pageSize=0', 'pageSize'], ['pageSize=201', 'pageSize'], ['page=0', 'page'], ['role=boss', 'role'], ['sort=name', '']])('answers 400 for ?%s', async (text, path) => {
    expectIssueAt(await administrator.client.get(`/api/members?${text}`), path)
  })

  it('answers 401 and 403', async () => {
    expectError(await createClient().get('/api/members'), 401, 'not-signed-in')
    for (const person of [student, patientAccount]) expectError(await person.client.get('/api/members'), 403, 'not-allowed')
  })
})
