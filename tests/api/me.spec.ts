import { afterAll, describe, expect, it } from 'vitest'
import { MeSchema } from '#shared/schemas/account'
import { expectBody, expectError } from '../fixtures/api/answers'
import { createClient } from '../fixtures/api/client'
import { closeDatabase } from '../fixtures/api/database'
import { makeAccount, makeClinic, makePatientAccount, makeTherapist, signIn } from '../fixtures/api/people'
import { makePatient } from '../fixtures/api/records'

afterAll(closeDatabase)

const clinic = await makeClinic('me', { timeZone: 'Europe/Oslo' })

describe('GET /api/me', () => {
  it('answers who is signed in, in which clinic, and nothing about passwords or sessions', async () => {
    const person = await makeTherapist(clinic, 'Orla Findlay')
    const answer = await person.client.get('/api/me')
    expect(expectBody(answer, 200, MeSchema)).toEqual({
      id: person.id, name: 'Orla Findlay', email: person.email, roles: ['therapist'],
      clinic: { id: clinic.id, name: clinic.name, timeZone: 'Europe/Oslo', units: 'metric' },
    })
    expect(answer.headers.get('cache-control')).toBe('no-store')
  })

  it('names all roles of a person who has more than one', async () => {
    const person = await makeAccount(clinic, ['administrator', 'therapist'])
    await signIn(person)
    expect([...expectBody(await person.client.get('/api/me'), 200, MeSchema).roles].sort()).toEqual(['administrator', 'therapist'])
  })

  it('names the chart of a person who signs in as a patient', async () => {
    const patient = await makePatient(await makeTherapist(clinic))
    const person = await makePatientAccount(clinic, patient.id)
    expect(expectBody(await person.client.get('/api/me'), 200, MeSchema)).toMatchObject({ roles: ['patient'], patientId: patient.id })
  })

  it('answers 401 to someone who is not signed in', async () => {
    expectError(await createClient().get('/api/me'), 401, 'not-signed-in')
  })
})
