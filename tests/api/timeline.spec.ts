import { afterAll, describe, expect, it } from 'vitest'
import { MarkingSchema } from '#shared/schemas/marking'
import { TimelineSchema } from '#shared/schemas/timeline'
import { comparable, expectBody, expectError, expectIssueAt } from '../fixtures/api/answers'
import { createClient } from '../fixtures/api/client'
import { closeDatabase } from '../fixtures/api/database'
import { SAGITTAL_BODY } from '../fixtures/api/marking-bodies'
import { makeAdministrator, makeClinic, makePatientAccount, makeStudent, makeTherapist } from '../fixtures/api/people'
import { makeBout, makeMarking, makePatient, makeSession, makeStill } from '../fixtures/api/records'

afterAll(closeDatabase)

const clinic = await makeClinic('timeline')
const therapist = await makeTherapist(clinic)
const colleague = await makeTherapist(clinic)
const stranger = await makeTherapist(await makeClinic('timeline-elsewhere'))
const ABSENT = '01900000-0000-7000-8000-000000000000'

async function timeline(patientId: string, text = '', by = therapist) {
  return expectBody(await by.client.get(`/api/patients/${patientId}/timeline${text}`), 200, TimelineSchema)
}

describe('GET /api/patients/:id/timeline', () => {
  it('shows a final marking\'s readings with their place, and no draft', async () => {
    const patient = await makePatient(therapist, { massKg: 80 })
    const session = await makeSession(therapist, patient.id)
    const bout = await makeBout(therapist, session.id, 0, { weightOffKg: 16 })
    const place = await makeStill(therapist, session, { boutId: bout.id, recordedAt: '2026-11-02T09:01:00.000Z' })
    const draft = await makeStill(therapist, session)
    await makeMarking(therapist, draft.stillId, { status: 'draft' })
    expect((await timeline(patient.id)).readings).toEqual([])
    const marking = await makeMarking(therapist, place.stillId)
    const { readings } = await timeline(patient.id)
    const sortBy = (rows: readonly { measure: string }[]) => [...rows].sort((a, b) => a.measure.localeCompare(b.measure))
    expect(sortBy(readings)).toEqual(sortBy(marking.readings).map(reading => ({
      ...reading, id: expect.any(String), stillId: place.stillId, clipId: place.clipId, sessionId: session.id, boutId: bout.id, markingVersion: 1,
      at: '2026-11-02T09:01:00.000Z', supportPercent: 20,
    })))
    expect(new Set(readings.map(reading => reading.id)).size).toBe(readings.length)
  })

  it('keeps the last final version while a later draft is worked on, and follows the next final one', async () => {
    const patient = await makePatient(therapist)
    const { stillId } = await makeStill(therapist, await makeSession(therapist, patient.id))
    const marking = await makeMarking(therapist, stillId)
    const moved = { ...SAGITTAL_BODY, landmarks: { ...SAGITTAL_BODY.landmarks, acromion: { x: 560, y: 260 } } }
    const save = (status: string, version: number) => therapist.client.put(`/api/markings/${marking.id}`, { ...moved, status }, { ifMatch: version })
    expectBody(await save('draft', 1), 200, MarkingSchema)
    const trunk = async () => (await timeline(patient.id, '?measure=trunkInclination')).readings.map(reading => [reading.markingVersion, Math.round(reading.value * 10) / 10])
    expect(await trunk()).toEqual([[1, -2.2]])
    await save('final', 2)
    expect(await trunk()).toEqual([[3, 10.9]])
  })

  it('dates a reading by the clip, else by the start of the session, oldest first', async () => {
    const patient = await makePatient(therapist)
    const late = await makeSession(therapist, patient.id, { startedAt: '2026-11-09T09:00:00Z' })
    const early = await makeSession(therapist, patient.id, { startedAt: '2026-11-03T09:00:00Z' })
    await makeMarking(therapist, (await makeStill(therapist, late)).stillId)
    await makeMarking(therapist, (await makeStill(therapist, late, { recordedAt: '2026-11-09T09:20:00+02:00' })).stillId)
    await makeMarking(therapist, (await makeStill(therapist, early)).stillId)
    expect((await timeline(patient.id, '?measure=kneeFlexion')).readings.map(reading => reading.at))
      .toEqual(['2026-11-03T09:00:00.000Z', '2026-11-09T07:20:00.000Z', '2026-11-09T09:00:00.000Z'])
  })

  it('gives a clip without a bout the session\'s support when its bouts agree, and none when they differ', async () => {
    const patient = await makePatient(therapist, { massKg: 50 })
    const session = await makeSession(therapist, patient.id)
    await makeMarking(therapist, (await makeStill(therapist, session)).stillId)
    const support = async () => (await timeline(patient.id, '?measure=kneeFlexion')).readings.map(reading => reading.supportPercent)
    expect(await support()).toEqual([null])
    await makeBout(therapist, session.id, 0, { weightOffKg: 10 })
    await makeBout(therapist, session.id, 5, { weightOffKg: 10 })
    expect(await support()).toEqual([20])
    await makeBout(therapist, session.id, 10, { weightOffKg: 5 })
    expect(await support()).toEqual([null])
  })

  it('narrows to a measure and to a period, its ends included', async () => {
    const patient = await makePatient(therapist)
    const session = await makeSession(therapist, patient.id, { startedAt: '2026-11-02T09:00:00Z' })
    await makeBout(therapist, session.id, 0)
    const later = await makeSession(therapist, patient.id, { startedAt: '2026-11-20T09:00:00Z' })
    for (const one of [session, later]) await makeMarking(therapist, (await makeStill(therapist, one)).stillId)
    expect(new Set((await timeline(patient.id, '?measure=hipFlexion')).readings.map(reading => reading.measure))).toEqual(new Set(['hipFlexion']))
    expect((await timeline(patient.id, '?measure=noSuchMeasure')).readings).toEqual([])
    const count = async (text: string) => {
      const { readings, bouts, milestones } = await timeline(patient.id, `?measure=kneeFlexion${text}`)
      return [readings.length, bouts.length, milestones.length]
    }
    expect(await count('')).toEqual([2, 1, 1])
    expect(await count('&from=2026-11-20T09:00:00Z')).toEqual([1, 0, 0])
    expect(await count('&to=2026-11-02T09:00:00Z')).toEqual([1, 1, 0])
    expect(await count('&from=2026-11-02T10:00:00%2B01:00&to=2026-11-20T09:00:00.000Z')).toEqual([2, 1, 1])
  })

  it('shows bouts and what was reached for the first time', async () => {
    const patient = await makePatient(therapist, { massKg: 100 })
    const session = await makeSession(therapist, patient.id)
    const first = await makeBout(therapist, session.id, 0, { endedAt: '2026-11-02T09:00:30.000Z', weightOffKg: 40, helpers: 2, assistance: 'substantial', exertion: 7, buckles: 2 })
    const second = await makeBout(therapist, session.id, 5, { endedAt: '2026-11-02T09:10:00.000Z', weightOffKg: 0, helpers: 1, assistance: 'supervision' })
    const running = await makeBout(therapist, session.id, 20, { endedAt: null, weightOffKg: 0, helpers: 1, assistance: 'supervision' })
    const { bouts, milestones } = await timeline(patient.id)
    expect(bouts.map(bout => bout.id)).toEqual([first.id, second.id, running.id])
    expect(bouts[0]).toEqual({
      id: first.id, sessionId: session.id, startedAt: first.startedAt, endedAt: first.endedAt, durationMs: 30_000, supportPercent: 40, weightOffKg: 40,
      assistance: 'substantial', helpers: 2, exertion: 7, buckles: 2,
    })
    const at = (moment: string | null) => ({ at: moment, sessionId: session.id, boutId: second.id })
    expect(milestones).toEqual([
      { kind: 'support-lowered', to: 0, ...at(second.startedAt) }, { kind: 'fewer-helpers', to: 1, ...at(second.startedAt) }, { kind: 'less-assistance', to: 'supervision', ...at(second.startedAt) },
      { kind: 'first-minute', to: null, ...at(second.endedAt) }, { kind: 'first-unsupported-minute', to: null, ...at(second.endedAt) }, { kind: 'five-minutes', to: null, ...at(second.endedAt) },
    ])
  })

  it('shows a person who signs in as a patient their own and no other', async () => {
    const [own, other] = [await makePatient(therapist), await makePatient(therapist)]
    await makeMarking(therapist, (await makeStill(therapist, await makeSession(therapist, own.id))).stillId)
    const person = await makePatientAccount(clinic, own.id)
    expect((await timeline(own.id, '', person)).readings.length).toBeGreaterThan(0)
    const answers = [await person.client.get(`/api/patients/${other.id}/timeline`), await person.client.get(`/api/patients/${ABSENT}/timeline`)]
    for (const answer of answers) expectError(answer, 404, 'patient-not-found')
    expect(new Set(answers.map(answer => JSON.stringify(comparable(answer)))).size).toBe(1)
  })

  it.each([['from=yesterday', 'from'], ['to=2026-11-02', 'to'], ['measure=a&measure=b', 'measure'], ['measure=%00', 'measure'], [`measure=${'x'.repeat(61)}`, 'measure'], ['page=1', '']])('answers 400 for ?%s', async (text, path) => {
    expectIssueAt(await therapist.client.get(`/api/patients/${(await makePatient(therapist)).id}/timeline?${text}`), path)
  })

  it('answers 401, 403 and 404', async () => {
    const patient = await makePatient(therapist)
    const path = `/api/patients/${patient.id}/timeline`
    expectError(await createClient().get(path), 401, 'not-signed-in')
    expectError(await (await makeStudent(clinic)).client.get(path), 403, 'not-allowed')
    for (const person of [colleague, stranger, await makeAdministrator(clinic)]) expectError(await person.client.get(path), 404, 'patient-not-found')
    expectError(await therapist.client.get('/api/patients/mine/timeline'), 404, 'patient-not-found')
  })
})
