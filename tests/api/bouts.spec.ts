import { afterAll, describe, expect, it } from 'vitest'
import { BoutSchema } from '#shared/schemas/bout'
import { HomeSchema } from '#shared/schemas/home'
import { ChartSchema, PatientListSchema } from '#shared/schemas/patient'
import { SessionDetailSchema, SessionListSchema } from '#shared/schemas/session'
import { comparable, expectBody, expectError, expectIssueAt } from '../fixtures/api/answers'
import { createClient } from '../fixtures/api/client'
import { auditOf, closeDatabase, query, refusalOf } from '../fixtures/api/database'
import { makeAdministrator, makeClinic, makeStudent, makeTherapist } from '../fixtures/api/people'
import { boutBody, makeBout, makePatient, makeSession } from '../fixtures/api/records'

afterAll(closeDatabase)

const clinic = await makeClinic('bouts')
const therapist = await makeTherapist(clinic)
const colleague = await makeTherapist(clinic)
const stranger = await makeTherapist(await makeClinic('bouts-elsewhere'))
const ABSENT = '01900000-0000-7000-8000-000000000000'

/** A session of a new patient of 80 kg, with nothing in it. */
async function freshSession(fields: Record<string, unknown> = {}) {
  return makeSession(therapist, (await makePatient(therapist, { massKg: 80, ...fields })).id)
}

function add(sessionId: string, body: unknown, by = therapist) {
  return by.client.post(`/api/sessions/${sessionId}/bouts`, body)
}

async function countBouts(patientId: string): Promise<number> {
  const [row] = await query<{ count: number }>(clinic.id, 'select count(*)::int as count from bout where patient_id = $1', [patientId])
  return row?.count ?? Number.NaN
}

describe('POST /api/sessions/:id/bouts', () => {
  it('keeps every field, works out support, load asymmetry and duration, and writes an audit row', async () => {
    const session = await freshSession()
    const body = boutBody(0, {
      weightOffKg: 16, assistance: 'substantial', helpers: 2, armSupport: true, exertion: 6, buckles: 1, pain: 2,
      vitals: [{ at: '2026-11-02T08:58:00.000Z', posture: 'sitting', systolic: 132, diastolic: 78, heartRate: 74, spo2: 97 }, { at: '2026-11-02T09:01:00.000Z', posture: 'standing', systolic: 118, diastolic: 74 }],
      symptoms: ['dizziness', 'sweating'], loadStrongerKg: 45, loadWeakerKg: 15, aids: ['shoes', 'ankle-foot-orthosis'], cues: 'Look up.\nPress the heel down.', endedBecause: 'fatigue', endedNote: 'asked to sit',
    })
    const answer = await add(session.id, body)
    const bout = expectBody(answer, 201, BoutSchema)
    expect(bout).toMatchObject({ ...body, sessionId: session.id, patientId: session.patientId, supportPercent: 20, loadAsymmetryPercent: 50, durationMs: 120_000, version: 1 })
    expect(answer.headers.get('etag')).toBe('"1"')
    expect(await auditOf(clinic.id, { requestId: answer.headers.get('x-request-id') ?? '' }))
      .toMatchObject([{ action: 'bout.create', actor_id: therapist.id, target_id: bout.id, patient_id: session.patientId, before: null }])
    expect(expectBody(await therapist.client.get(`/api/bouts/${bout.id}`), 200, BoutSchema)).toEqual(bout)
  })

  it('takes a bout without an end for a running one', async () => {
    const session = await freshSession()
    const { endedAt: _end, ...running } = boutBody(0)
    expect(expectBody(await add(session.id, running), 201, BoutSchema)).toMatchObject({ endedAt: null, durationMs: null })
    expectError(await add(session.id, boutBody(60)), 409, 'bout-overlaps')
  })

  it('leaves support unknown where the mass or the weight off is', async () => {
    const without = await freshSession({ massKg: null })
    expect((await makeBout(therapist, without.id, 0, { weightOffKg: 20 })).supportPercent).toBeNull()
    expect((await makeBout(therapist, (await freshSession()).id)).supportPercent).toBeNull()
    expect((await makeBout(therapist, (await freshSession()).id, 0, { weightOffKg: 0 })).supportPercent).toBe(0)
  })

  it('answers 409 at the field for a bout that overlaps another of the person, in any session of theirs', async () => {
    const session = await freshSession()
    const later = await makeSession(therapist, session.patientId, { startedAt: '2026-11-02T09:30:00Z' })
    await makeBout(therapist, session.id, 10, { endedAt: '2026-11-02T09:20:00.000Z' })
    for (const [minute, endedAt] of [[8, '2026-11-02T09:11:00Z'], [19, '2026-11-02T09:25:00Z'], [12, '2026-11-02T09:13:00Z'], [5, '2026-11-02T09:25:00Z'], [10, '2026-11-02T09:20:00Z']] as const) {
      for (const { id } of [session, later]) {
        expect(expectError(await add(id, boutBody(minute, { endedAt })), 409, 'bout-overlaps').issues).toEqual([{ path: 'startedAt', message: 'overlaps' }])
      }
    }
    expect(await countBouts(session.patientId)).toBe(1)
  })

  it('lets one bout begin at the moment another ends, and two people stand at the same time', async () => {
    const session = await freshSession()
    await makeBout(therapist, session.id, 0)
    await makeBout(therapist, session.id, 2)
    await makeBout(therapist, (await freshSession()).id, 0)
  })

  it.each([['one session', false], ['two sessions of a person', true]])('lets exactly one of parallel bouts at the same time through, in %s', async (_what, isSpread) => {
    for (let round = 0; round < 3; round++) {
      const session = await freshSession()
      const other = isSpread ? await makeSession(therapist, session.patientId) : session
      const answers = await Promise.all(Array.from({ length: 8 }, (_, index) => add(index % 2 ? session.id : other.id, boutBody(0, { endedAt: `2026-11-02T09:0${2 + (index % 3)}:00Z` }))))
      expect(answers.map(answer => answer.status).sort()).toEqual([201, 409, 409, 409, 409, 409, 409, 409])
      for (const answer of answers.filter(({ status }) => status !== 201)) expectError(answer, 409, 'bout-overlaps')
      expect(await countBouts(session.patientId)).toBe(1)
    }
  })

  it('answers 400 for an end before or at its start', async () => {
    const session = await freshSession()
    expectIssueAt(await add(session.id, boutBody(5, { endedAt: '2026-11-02T09:04:59.999Z' })), 'endedAt')
    expectIssueAt(await add(session.id, boutBody(5, { endedAt: '2026-11-02T09:05:00Z' })), 'endedAt')
    expectIssueAt(await add(session.id, boutBody(5, { endedAt: '2026-11-02T10:04:00+01:00' })), 'endedAt')
  })

  it('answers 400 for more weight off the feet than the person weighs', async () => {
    const session = await freshSession()
    expectIssueAt(await add(session.id, boutBody(0, { weightOffKg: 80.5 })), 'weightOffKg', 'support-above-mass')
    expect((await makeBout(therapist, session.id, 0, { weightOffKg: 80 })).supportPercent).toBe(100)
  })

  it.each([
    ['a systolic pressure of 500', { systolic: 500 }, 'vitals.0.systolic'], ['a systolic pressure of 10', { systolic: 10 }, 'vitals.0.systolic'],
    ['a diastolic pressure above the systolic', { systolic: 110, diastolic: 120 }, 'vitals.0.systolic'], ['equal pressures', { systolic: 100, diastolic: 100 }, 'vitals.0.systolic'],
    ['a heart rate of 400', { heartRate: 400 }, 'vitals.0.heartRate'], ['a heart rate of 72.5', { heartRate: 72.5 }, 'vitals.0.heartRate'],
    ['a saturation of 101 %', { spo2: 101 }, 'vitals.0.spo2'], ['no value at all', {}, 'vitals.0'], ['only empty values', { systolic: null, spo2: null }, 'vitals.0'],
    ['an unknown posture', { posture: 'hanging', spo2: 97 }, 'vitals.0.posture'], ['no moment', { at: undefined, spo2: 97 }, 'vitals.0.at'], ['a temperature', { spo2: 97, temperature: 37 }, 'vitals.0'],
  ])('answers 400 naming the field for vital signs with %s', async (_what, vitals, path) => {
    const session = await freshSession()
    expectIssueAt(await add(session.id, boutBody(0, { vitals: [{ at: '2026-11-02T09:00:00Z', posture: 'standing', ...vitals }] })), path)
  })

  it.each([
    ['no assistance', { assistance: undefined }, 'assistance'], ['an unknown assistance', { assistance: 'moderate' }, 'assistance'],
    ['seven helpers', { helpers: 7 }, 'helpers'], ['half a helper', { helpers: 0.5 }, 'helpers'], ['an exertion of 11', { exertion: 11 }, 'exertion'], ['an exertion of -1', { exertion: -1 }, 'exertion'],
    ['a pain of 12', { pain: 12 }, 'pain'], ['a negative count of bucklings', { buckles: -1 }, 'buckles'], ['a weight below nothing', { weightOffKg: -0.1 }, 'weightOffKg'],
    ['a weight as text', { weightOffKg: '20' }, 'weightOffKg'], ['an unknown symptom', { symptoms: ['boredom'] }, 'symptoms.0'], ['an unknown aid', { aids: ['broom'] }, 'aids.0'],
    ['an unknown ending', { endedBecause: 'lunch' }, 'endedBecause'], ['41 sets of vital signs', { vitals: Array.from({ length: 41 }, () => ({ at: '2026-11-02T09:00:00Z', posture: 'standing', spo2: 97 })) }, 'vitals'],
    ['a NUL character', { cues: 'a\u0000' }, 'cues'], ['no start', { startedAt: undefined }, 'startedAt'], ['another patient', { patientId: ABSENT }, ''], ['a support percentage', { supportPercent: 20 }, ''],
  ])('answers 400 naming the field for %s', async (_what, fields, path) => {
    const session = await freshSession()
    expectIssueAt(await add(session.id, boutBody(0, fields)), path)
  })

  it('answers the same 404 for an absent session, another team\'s and another clinic\'s', async () => {
    const session = await freshSession()
    const answers = [await add(ABSENT, boutBody()), await add(session.id, boutBody(), colleague), await add(session.id, boutBody(), stranger), await add('today', boutBody())]
    for (const answer of answers) expectError(answer, 404, 'session-not-found')
    expect(new Set(answers.map(answer => JSON.stringify(comparable(answer)))).size).toBe(1)
  })

  it('answers 401 and 403', async () => {
    const session = await freshSession()
    expectError(await createClient().post(`/api/sessions/${session.id}/bouts`, boutBody()), 401, 'not-signed-in')
    expectError(await add(session.id, boutBody(), await makeAdministrator(clinic)), 403, 'not-allowed')
    expectError(await add(session.id, boutBody(), await makeStudent(clinic)), 403, 'not-allowed')
  })

  it('with a mistyped year of 26 years\' length breaks no list, chart or page', async () => {
    const session = await freshSession()
    const bout = await makeBout(therapist, session.id, 0, { startedAt: '2000-11-02T09:00:00.000Z' })
    const lengthMs = Date.parse('2026-11-02T09:02:00Z') - Date.parse('2000-11-02T09:00:00Z')
    expect(bout.durationMs).toBe(lengthMs)
    expect(expectBody(await therapist.client.get(`/api/patients/${session.patientId}`), 200, ChartSchema).longestBoutMs).toBe(lengthMs)
    expectBody(await therapist.client.get('/api/patients?pageSize=200'), 200, PatientListSchema)
    expectBody(await therapist.client.get(`/api/sessions/${session.id}`), 200, SessionDetailSchema)
    expect(expectBody(await therapist.client.get(`/api/patients/${session.patientId}/sessions`), 200, SessionListSchema).items[0]?.totalBoutMs).toBe(lengthMs)
    expectBody(await therapist.client.get('/api/home'), 200, HomeSchema)
  })
})

describe('GET /api/bouts/:id', () => {
  it('answers the same 404 for an absent one, another team\'s, another clinic\'s and a malformed id', async () => {
    const bout = await makeBout(therapist, (await freshSession()).id)
    const answers = [
      await therapist.client.get(`/api/bouts/${ABSENT}`), await colleague.client.get(`/api/bouts/${bout.id}`),
      await stranger.client.get(`/api/bouts/${bout.id}`), await therapist.client.get('/api/bouts/1'),
    ]
    for (const answer of answers) expectError(answer, 404, 'bout-not-found')
    expect(new Set(answers.map(answer => JSON.stringify(comparable(answer)))).size).toBe(1)
  })

  it('answers 401 and 403', async () => {
    const bout = await makeBout(therapist, (await freshSession()).id)
    expectError(await createClient().get(`/api/bouts/${bout.id}`), 401, 'not-signed-in')
    expectError(await (await makeStudent(clinic)).client.get(`/api/bouts/${bout.id}`), 403, 'not-allowed')
  })
})

describe('PATCH /api/bouts/:id', () => {
  const patch = (boutId: string, body: unknown, ifMatch: string | number = 1, by = therapist) => by.client.patch(`/api/bouts/${boutId}`, body, { ifMatch })

  it('ends a running bout', async () => {
    const session = await freshSession()
    const running = await makeBout(therapist, session.id, 0, { endedAt: null })
    const ended = expectBody(await patch(running.id, { endedAt: '2026-11-02T09:07:00Z', endedBecause: 'planned' }), 200, BoutSchema)
    expect(ended).toEqual({ ...running, endedAt: '2026-11-02T09:07:00.000Z', durationMs: 420_000, endedBecause: 'planned', version: 2 })
    await makeBout(therapist, session.id, 8)
  })

  it('leaves the trace of corrected times in the audit trail', async () => {
    const bout = await makeBout(therapist, (await freshSession()).id, 0)
    const answer = await patch(bout.id, { startedAt: '2026-11-02T08:59:00Z', exertion: 4 })
    expect(answer.headers.get('etag')).toBe('"2"')
    const rows = await auditOf(clinic.id, { requestId: answer.headers.get('x-request-id') ?? '' })
    expect(rows).toMatchObject([{
      action: 'bout.change', actor_id: therapist.id, target_id: bout.id,
      before: { startedAt: bout.startedAt, endedAt: bout.endedAt, version: 1 }, after: { startedAt: '2026-11-02T08:59:00.000Z', endedAt: bout.endedAt, version: 2 },
    }])
  })

  it('empties an optional field with null', async () => {
    const bout = await makeBout(therapist, (await freshSession()).id, 0, { weightOffKg: 20, helpers: 1, cues: 'x' })
    expect(expectBody(await patch(bout.id, { weightOffKg: null, helpers: null, cues: null }), 200, BoutSchema)).toMatchObject({ weightOffKg: null, supportPercent: null, helpers: null, cues: null })
  })

  it('answers 428 without a version and 412 with the present state for another one', async () => {
    const bout = await makeBout(therapist, (await freshSession()).id)
    expectError(await therapist.client.patch(`/api/bouts/${bout.id}`, { pain: 1 }), 428, 'version-required')
    for (const ifMatch of [2, '"2"', '0']) expect(expectError(await patch(bout.id, { pain: 1 }, ifMatch), 412, 'stale-version').current).toEqual(bout)
    expect((await patch(bout.id, { pain: 1 }, '"1"')).status).toBe(200)
  })

  it('answers 409 for times that overlap another bout, and changes nothing', async () => {
    const session = await freshSession()
    await makeBout(therapist, session.id, 0)
    const second = await makeBout(therapist, session.id, 5)
    expectError(await patch(second.id, { startedAt: '2026-11-02T09:01:00Z' }), 409, 'bout-overlaps')
    expectError(await patch(second.id, { startedAt: '2026-11-02T08:00:00Z', endedAt: null }), 409, 'bout-overlaps')
    expect(expectBody(await therapist.client.get(`/api/bouts/${second.id}`), 200, BoutSchema)).toEqual(second)
  })

  it('answers 400 for an end before the kept start and a start after the kept end', async () => {
    const bout = await makeBout(therapist, (await freshSession()).id, 10)
    expectIssueAt(await patch(bout.id, { endedAt: '2026-11-02T09:09:00Z' }), 'endedAt')
    expectIssueAt(await patch(bout.id, { startedAt: '2026-11-02T09:13:00Z' }), 'endedAt')
    expectIssueAt(await patch(bout.id, { weightOffKg: 81 }), 'weightOffKg', 'support-above-mass')
  })

  it.each([
    ['nothing to change', {}, ''], ['an unknown key', { colour: 'red' }, ''], ['another session', { sessionId: ABSENT }, ''], ['a removed start', { startedAt: null }, 'startedAt'],
    ['a removed assistance', { assistance: null }, 'assistance'], ['impossible vital signs', { vitals: [{ at: '2026-11-02T09:00:00Z', posture: 'lying', systolic: 80, diastolic: 90 }] }, 'vitals.0.systolic'],
  ])('answers 400 for %s', async (_what, body, path) => {
    expectIssueAt(await patch((await makeBout(therapist, (await freshSession()).id)).id, body), path)
  })

  it('answers 401, 403 and 404', async () => {
    const bout = await makeBout(therapist, (await freshSession()).id)
    expectError(await createClient().patch(`/api/bouts/${bout.id}`, { pain: 1 }, { ifMatch: 1 }), 401, 'not-signed-in')
    expectError(await patch(bout.id, { pain: 1 }, 1, await makeAdministrator(clinic)), 403, 'not-allowed')
    expectError(await patch(bout.id, { pain: 1 }, 1, colleague), 404, 'bout-not-found')
    expectError(await patch(bout.id, { pain: 1 }, 9, stranger), 404, 'bout-not-found')
  })
})

describe('the database', () => {
  it('itself refuses overlapping bouts, an end before the start and impossible numbers', async () => {
    const session = await freshSession()
    await makeBout(therapist, session.id, 0)
    const insert = (values: string) => refusalOf({ as: 'app', clinicId: clinic.id }, `insert into bout (id, clinic_id, patient_id, session_id, assistance, started_at, ended_at, exertion) values ('${ABSENT}', $1, $2, $3, 'partial', ${values})`, [clinic.id, session.patientId, session.id])
    expect(await insert('\'2026-11-02T09:01:00Z\', \'2026-11-02T09:05:00Z\', 5')).toBe('23P01')
    expect(await insert('\'2026-11-02T09:05:00Z\', \'2026-11-02T09:04:00Z\', 5')).toMatch(/^(23514|22000)$/)
    expect(await insert('\'2026-11-02T09:05:00Z\', null, 11')).toBe('23514')
    expect(await insert('\'2026-11-02T09:05:00Z\', null, 10')).toBe('accepted')
  })
})
