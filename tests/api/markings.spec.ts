import { afterAll, describe, expect, it } from 'vitest'
import { MarkingSchema, MarkingsSchema } from '#shared/schemas/marking'
import { comparable, expectBody, expectError, expectIssueAt } from '../fixtures/api/answers'
import { createClient } from '../fixtures/api/client'
import { auditOf, closeDatabase, query, refusalOf } from '../fixtures/api/database'
import { FRONTAL_BODY, FRONTAL_READINGS, MIRRORED_BODY, ROLLED_BODY, SAGITTAL_BODY, valuesOf } from '../fixtures/api/marking-bodies'
import { makeAdministrator, makeClinic, makePatientAccount, makeStudent, makeTherapist } from '../fixtures/api/people'
import { makeMarking, makePatient, makeSession, makeStill } from '../fixtures/api/records'
import { WORKED_SAGITTAL_READINGS } from '../reference/worked-values'

afterAll(closeDatabase)

const clinic = await makeClinic('markings', { targets: { trunkInclination: { low: -8, high: 5 } } })
const therapist = await makeTherapist(clinic, 'Tove Marchetti')
const colleague = await makeTherapist(clinic, 'Una Colleague')
const stranger = await makeTherapist(await makeClinic('markings-elsewhere'))
const patient = await makePatient(therapist)
const session = await makeSession(therapist, patient.id)
const ABSENT = '01900000-0000-7000-8000-000000000000'

const freshStill = async (facts: Parameters<typeof makeStill>[2] = {}) => (await makeStill(therapist, session, facts)).stillId
const mark = (stillId: string, body: unknown, by = therapist) => by.client.post(`/api/stills/${stillId}/markings`, body)
const save = (markingId: string, body: unknown, ifMatch?: string | number, by = therapist) => by.client.put(`/api/markings/${markingId}`, body, ifMatch === undefined ? {} : { ifMatch })
const read = async (markingId: string, version?: number) => expectBody(await therapist.client.get(`/api/markings/${markingId}${version === undefined ? '' : `?version=${version}`}`), 200, MarkingSchema)

/** The sagittal body with one landmark more or other. */
function withLandmark(name: string, point: Record<string, unknown>) {
  return { ...SAGITTAL_BODY, landmarks: { ...SAGITTAL_BODY.landmarks, [name]: point }, status: 'final' }
}

async function countMarkings(stillId: string): Promise<number> {
  const [row] = await query<{ count: number }>(clinic.id, 'select count(*)::int as count from marking where still_id = $1', [stillId])
  return row?.count ?? Number.NaN
}

describe('POST /api/stills/:id/markings', () => {
  it('answers the readings that the server computed, which are the worked check values, and writes an audit row', async () => {
    const stillId = await freshStill()
    const answer = await mark(stillId, { ...SAGITTAL_BODY, status: 'final' })
    const marking = expectBody(answer, 201, MarkingSchema)
    expect(marking).toMatchObject({ stillId, version: 1, status: 'final', author: { id: therapist.id, name: 'Tove Marchetti' }, body: SAGITTAL_BODY })
    expect(answer.headers.get('etag')).toBe('"1"')
    const values = valuesOf(marking.readings)
    for (const [measure, expected] of Object.entries(WORKED_SAGITTAL_READINGS)) expect(values[measure], measure).toBeCloseTo(expected, 3)
    for (const reading of marking.readings) {
      expect(reading).toMatchObject({ definitionVersion: 1, view: 'sagittal' })
      expect(reading.low).toBeLessThan(reading.value)
      expect(reading.high - reading.value).toBeCloseTo(1.96 * reading.sd, 2)
    }
    expect(await auditOf(clinic.id, { requestId: answer.headers.get('x-request-id') ?? '' }))
      .toMatchObject([{ action: 'marking.create', actor_id: therapist.id, target_id: marking.id, patient_id: patient.id, after: { version: 1, status: 'final' } }])
  })

  it('takes the view from the clip: frontal landmarks give the worked frontal values', async () => {
    const values = valuesOf((await makeMarking(therapist, await freshStill({ view: 'frontal-anterior' }), { ...FRONTAL_BODY, facing: undefined })).readings)
    for (const [measure, expected] of Object.entries(FRONTAL_READINGS)) expect(values[measure], measure).toBeCloseTo(expected, 3)
  })

  it('gives the mirrored person the same readings, and a rolled camera its correction', async () => {
    const mirrored = valuesOf((await makeMarking(therapist, await freshStill(), MIRRORED_BODY)).readings)
    for (const [measure, expected] of Object.entries(WORKED_SAGITTAL_READINGS)) expect(mirrored[measure], measure).toBeCloseTo(expected, 3)
    const rolled = await makeMarking(therapist, await freshStill(), ROLLED_BODY)
    expect(valuesOf(rolled.readings).trunkInclination).toBeCloseTo(7.8803, 3)
    expect(rolled.readings.find(reading => reading.measure === 'trunkInclination')?.warnings).not.toContain('no-plumb-line')
  })

  it('warns where no plumb line was drawn, and for the angles between segments does not', async () => {
    const { readings } = await makeMarking(therapist, await freshStill())
    expect(readings.find(reading => reading.measure === 'trunkInclination')?.warnings).toContain('no-plumb-line')
    expect(readings.find(reading => reading.measure === 'kneeFlexion')?.warnings).not.toContain('no-plumb-line')
  })

  it('takes the near side from the clip unless the marking says otherwise', async () => {
    const stillId = await freshStill({ side: 'right' })
    expect((await makeMarking(therapist, stillId)).readings[0]?.side).toBe('right')
    expect((await makeMarking(therapist, stillId, { side: 'left', mirrored: true })).readings[0]?.side).toBe('left')
    expect((await makeMarking(therapist, await freshStill())).readings[0]?.side).toBeUndefined()
  })

  it('judges by the clinic\'s own targets', async () => {
    const strict = await makeClinic('markings-strict', { targets: { trunkInclination: { low: 20, high: 30 } } })
    const person = await makeTherapist(strict)
    const place = await makeStill(person, await makeSession(person, (await makePatient(person)).id))
    expect((await makeMarking(person, place.stillId)).readings.find(reading => reading.measure === 'trunkInclination')?.targetStatus).toBe('outside')
    expect((await makeMarking(therapist, await freshStill())).readings.find(reading => reading.measure === 'trunkInclination')?.targetStatus).toBe('within')
  })

  it('withholds the centre of mass as soon as support is logged', async () => {
    const measures = async (fields: Record<string, unknown>) => (await makeMarking(therapist, await freshStill(), fields)).readings.map(reading => reading.measure)
    expect(await measures({})).toContain('centreOfMassOffset')
    expect(await measures({ supported: true })).not.toContain('centreOfMassOffset')
  })

  it('keeps a draft with nothing in it, and refuses to call that final', async () => {
    const stillId = await freshStill()
    expect((await makeMarking(therapist, stillId, { landmarks: {}, facing: undefined, status: 'draft' })).readings).toEqual([])
    expectIssueAt(await mark(stillId, { landmarks: {}, status: 'final' }), 'landmarks', 'nothing-marked')
  })

  it('gives each person their own marking of a still', async () => {
    await therapist.client.post(`/api/patients/${patient.id}/care-team`, { userId: colleague.id })
    const stillId = await freshStill()
    const [mine, theirs] = [await makeMarking(therapist, stillId), await makeMarking(colleague, stillId, { status: 'draft' })]
    await therapist.client.delete(`/api/patients/${patient.id}/care-team/${colleague.id}`)
    expect(theirs.id).not.toBe(mine.id)
    const { items } = expectBody(await therapist.client.get(`/api/stills/${stillId}/markings`), 200, MarkingsSchema)
    expect(items.map(item => [item.id, item.author.name, item.status])).toEqual([[theirs.id, 'Una Colleague', 'draft'], [mine.id, 'Tove Marchetti', 'final']])
  })

  it.each([
    ['a landmark outside the picture', withLandmark('tragus', { x: 1080.001, y: 150 }), 'landmarks.tragus'],
    ['a landmark left of the picture', withLandmark('tragus', { x: -0.001, y: 150 }), 'landmarks.tragus'],
    ['an unknown landmark', withLandmark('sternum', { x: 1, y: 1 }), 'landmarks.sternum'],
    ['a landmark of another view', withLandmark('asisLeft', { x: 1, y: 1 }), 'landmarks.asisLeft'],
    ['a coordinate as text', withLandmark('tragus', { x: 'NaN', y: 150 }), 'landmarks.tragus.x'],
    ['no coordinate (NaN and Infinity in JSON)', withLandmark('tragus', { x: Number.NaN, y: Number.POSITIVE_INFINITY }), 'landmarks.tragus.x'],
    ['a missing coordinate', withLandmark('tragus', { x: 5 }), 'landmarks.tragus.y'],
    ['a third coordinate', withLandmark('tragus', { x: 5, y: 5, z: 5 }), 'landmarks.tragus'],
    ['an sd of 0', withLandmark('tragus', { x: 530, y: 150, sd: 0 }), 'landmarks.tragus.sd'],
    ['a negative sd', withLandmark('tragus', { x: 530, y: 150, sd: -1 }), 'landmarks.tragus.sd'],
    ['a name that is no name', withLandmark('no name!', { x: 1, y: 1 }), 'landmarks.no name!'],
    ['a plumb line outside the picture', { ...SAGITTAL_BODY, plumbLine: { top: { x: 5, y: -3 }, bottom: { x: 5, y: 900 } }, status: 'final' }, 'plumbLine.top'],
    ['a scale of no length', { ...SAGITTAL_BODY, scale: { from: { x: 5, y: 5 }, to: { x: 5, y: 900 }, lengthMm: 0 }, status: 'final' }, 'scale.lengthMm'],
    ['a scale whose ends coincide', { ...SAGITTAL_BODY, scale: { from: { x: 5, y: 5 }, to: { x: 5, y: 5 }, lengthMm: 1000 }, status: 'final' }, 'scale.to'],
    ['no status', SAGITTAL_BODY, 'status'],
    ['an unknown status', { ...SAGITTAL_BODY, status: 'signed' }, 'status'],
    ['an unknown side', { ...SAGITTAL_BODY, side: 'near', status: 'final' }, 'side'],
    ['readings of its own', { ...SAGITTAL_BODY, readings: [], status: 'final' }, ''],
    ['a version', { ...SAGITTAL_BODY, version: 3, status: 'final' }, ''],
    ['an author', { ...SAGITTAL_BODY, authorId: ABSENT, status: 'final' }, ''],
    ['a reason with a NUL character', { ...SAGITTAL_BODY, notVisible: { elbow: 'a\u0000' }, status: 'final' }, 'notVisible.elbow'],
    ['a reason with half of a character pair', { ...SAGITTAL_BODY, notVisible: { elbow: 'a\ud800' }, status: 'final' }, 'notVisible.elbow'],
    ['a landmark that is placed and not visible', { ...SAGITTAL_BODY, notVisible: { tragus: 'hair' }, status: 'final' }, 'landmarks.tragus'],
    ['a body that is a list', [SAGITTAL_BODY], ''],
    ['a body that is null', null, ''],
  ])('answers 400 naming the field for %s, and keeps nothing', async (_what, body, path) => {
    const stillId = await freshStill()
    expectIssueAt(await mark(stillId, body), path)
    expect(await countMarkings(stillId)).toBe(0)
  })

  it.each([['1e309'], ['-1e309']])('answers 400 naming the field for the number %s', async (number) => {
    const stillId = await freshStill()
    const raw = JSON.stringify(withLandmark('tragus', { x: 'HERE', y: 150 })).replace('"HERE"', number)
    expectIssueAt(await therapist.client.post(`/api/stills/${stillId}/markings`, {}, { raw }), 'landmarks.tragus.x')
  })

  it.each([['NaN'], ['Infinity']])('answers 400 for %s, which is no JSON', async (word) => {
    const raw = JSON.stringify(withLandmark('tragus', { x: 'HERE', y: 150 })).replace('"HERE"', word)
    expectIssueAt(await therapist.client.post(`/api/stills/${await freshStill()}/markings`, {}, { raw }), '')
  })

  it('names the faults that have a code of their own', async () => {
    const stillId = await freshStill()
    const { heel: _heel, ...withoutHeel } = SAGITTAL_BODY.landmarks
    expectIssueAt(await mark(stillId, { landmarks: withoutHeel, status: 'final' }), 'facing', 'facing-required')
    expectIssueAt(await mark(stillId, withLandmark('canthus', { x: 530, y: 150 })), 'landmarks.canthus', 'landmarks-coincide')
    const plumbLine = { top: { x: 5, y: 100 }, bottom: { x: 5, y: 459 } }
    expectIssueAt(await mark(stillId, { ...SAGITTAL_BODY, plumbLine, status: 'final' }), 'plumbLine', 'plumb-line-too-short')
    expect((await mark(stillId, { ...SAGITTAL_BODY, plumbLine: { ...plumbLine, bottom: { x: 5, y: 460 } }, status: 'final' })).status).toBe(201)
  })

  it('takes landmarks on the edges of the picture, and fractions', async () => {
    const stillId = await freshStill()
    const marking = await makeMarking(therapist, stillId, { landmarks: { acromion: { x: 0, y: 0 }, greaterTrochanter: { x: 1080, y: 1080 }, lateralEpicondyle: { x: 0.125, y: 1079.999 } } })
    expect(marking.body.landmarks.lateralEpicondyle).toEqual({ x: 0.125, y: 1079.999 })
  })

  it('answers 400 for thousands of landmarks', async () => {
    const stillId = await freshStill()
    const landmarks = Object.fromEntries(Array.from({ length: 5000 }, (_, index) => [`point${index}`, { x: index % 1000, y: 1 }]))
    expectIssueAt(await mark(stillId, { landmarks, status: 'final' }), 'landmarks')
    expect(await countMarkings(stillId)).toBe(0)
  })

  it('answers 404 alike for an absent still, another team\'s, another clinic\'s and a malformed id', async () => {
    const stillId = await freshStill()
    const body = { ...SAGITTAL_BODY, status: 'final' }
    const answers = [await mark(ABSENT, body), await mark(stillId, body, colleague), await mark(stillId, body, stranger), await mark('12', body)]
    for (const answer of answers) expectError(answer, 404, 'still-not-found')
    expect(new Set(answers.map(answer => JSON.stringify(comparable(answer)))).size).toBe(1)
    expect(await countMarkings(stillId)).toBe(0)
  })

  it('answers 401 and 403', async () => {
    const stillId = await freshStill()
    const body = { ...SAGITTAL_BODY, status: 'final' }
    expectError(await createClient().post(`/api/stills/${stillId}/markings`, body), 401, 'not-signed-in')
    for (const person of [await makeStudent(clinic), await makeAdministrator(clinic), await makePatientAccount(clinic, patient.id)]) expectError(await mark(stillId, body, person), 403, 'not-allowed')
  })
})

describe('PUT /api/markings/:id', () => {
  it('saves a new version; earlier ones stay readable as they were', async () => {
    const first = await makeMarking(therapist, await freshStill())
    const moved = { ...SAGITTAL_BODY, landmarks: { ...SAGITTAL_BODY.landmarks, acromion: { x: 560, y: 260 } } }
    const answer = await save(first.id, { ...moved, status: 'final' }, 1)
    const second = expectBody(answer, 200, MarkingSchema)
    expect(second).toMatchObject({ id: first.id, version: 2, body: moved })
    expect(answer.headers.get('etag')).toBe('"2"')
    expect(valuesOf(second.readings).trunkInclination).toBeCloseTo(Math.atan2(50, 260) * 180 / Math.PI, 6)
    const third = expectBody(await save(first.id, { ...SAGITTAL_BODY, clothed: true, status: 'draft' }, '"2"'), 200, MarkingSchema)
    expect(third.version).toBe(3)
    expect(await read(first.id)).toEqual(third)
    expect(await read(first.id, 1)).toEqual(first)
    expect(await read(first.id, 2)).toEqual(second)
    expect(await auditOf(clinic.id, { requestId: answer.headers.get('x-request-id') ?? '' }))
      .toMatchObject([{ action: 'marking.save', actor_id: therapist.id, target_id: first.id, patient_id: patient.id, before: { version: 1 }, after: { version: 2 } }])
  })

  it('answers 428 without a version and 412 with the kept marking for another one', async () => {
    const marking = await makeMarking(therapist, await freshStill())
    expectError(await save(marking.id, { ...SAGITTAL_BODY, status: 'final' }), 428, 'version-required')
    for (const ifMatch of [2, '"0"', 'W/"1"']) expect(expectError(await save(marking.id, { ...SAGITTAL_BODY, status: 'final' }, ifMatch), 412, 'stale-version').current).toEqual(marking)
    expect(await read(marking.id)).toEqual(marking)
  })

  it('lets one of ten parallel saves of the same version win, and loses none of the versions', async () => {
    const marking = await makeMarking(therapist, await freshStill())
    const answers = await Promise.all(Array.from({ length: 10 }, (_, index) => save(marking.id, { ...SAGITTAL_BODY, landmarks: { ...SAGITTAL_BODY.landmarks, wrist: { x: 10 + index, y: 10 } }, status: 'final' }, 1)))
    expect(answers.map(answer => answer.status).sort()).toEqual([200, ...Array.from({ length: 9 }, () => 412)])
    const [row] = await query<{ versions: number }>(clinic.id, 'select count(*)::int as versions from marking_version where marking_id = $1', [marking.id])
    expect(row?.versions).toBe(2)
  })

  it('is for its author and for therapists of the care team; someone with an opening may look but not save', async () => {
    const own = await makePatient(therapist)
    const stillId = (await makeStill(therapist, await makeSession(therapist, own.id))).stillId
    const marking = await makeMarking(therapist, stillId)
    const covering = await makeTherapist(clinic)
    await covering.client.post(`/api/patients/${own.id}/openings`, { reason: 'Covering for a colleague' })
    expect((await covering.client.get(`/api/markings/${marking.id}`)).status).toBe(200)
    expectError(await save(marking.id, { ...SAGITTAL_BODY, status: 'final' }, 1, covering), 403, 'not-allowed')
    await therapist.client.post(`/api/patients/${own.id}/care-team`, { userId: covering.id })
    const saved = expectBody(await save(marking.id, { ...SAGITTAL_BODY, status: 'final' }, 1, covering), 200, MarkingSchema)
    expect(saved).toMatchObject({ version: 2, author: { id: therapist.id } })
  })

  it('lets an author with an opening change what they marked themselves', async () => {
    const own = await makePatient(therapist)
    const stillId = (await makeStill(therapist, await makeSession(therapist, own.id))).stillId
    const covering = await makeTherapist(clinic)
    await covering.client.post(`/api/patients/${own.id}/openings`, { reason: 'Covering for a colleague' })
    const marking = await makeMarking(covering, stillId)
    expect((await save(marking.id, { ...SAGITTAL_BODY, status: 'final' }, 1, covering)).status).toBe(200)
  })

  it('answers 400 as a first save does, and keeps no version', async () => {
    const marking = await makeMarking(therapist, await freshStill())
    expectIssueAt(await save(marking.id, withLandmark('tragus', { x: 5000, y: 1 }), 1), 'landmarks.tragus')
    expectIssueAt(await save(marking.id, { landmarks: {}, status: 'final' }, 1), 'landmarks', 'nothing-marked')
    expectIssueAt(await save(marking.id, { ...SAGITTAL_BODY, status: 'final', stillId: ABSENT }, 1), '')
    expect((await read(marking.id)).version).toBe(1)
  })

  it('answers 401, 403 and 404', async () => {
    const marking = await makeMarking(therapist, await freshStill())
    const body = { ...SAGITTAL_BODY, status: 'final' }
    expectError(await createClient().put(`/api/markings/${marking.id}`, body, { ifMatch: 1 }), 401, 'not-signed-in')
    expectError(await save(marking.id, body, 1, await makeAdministrator(clinic)), 403, 'not-allowed')
    for (const person of [colleague, stranger]) expectError(await save(marking.id, body, 1, person), 404, 'marking-not-found')
    for (const id of [ABSENT, 'latest']) expectError(await save(id, body, 1), 404, 'marking-not-found')
  })
})

describe('GET /api/markings/:id', () => {
  it('answers 404 for a version that does not exist and 400 for one that is no version', async () => {
    const marking = await makeMarking(therapist, await freshStill())
    expectError(await therapist.client.get(`/api/markings/${marking.id}?version=2`), 404, 'marking-not-found')
    for (const version of ['0', '-1', '1.5', 'first', '', '2147483648']) expectIssueAt(await therapist.client.get(`/api/markings/${marking.id}?version=${version}`), 'version')
    expectError(await therapist.client.get(`/api/markings/${marking.id}?version=2147483647`), 404, 'marking-not-found')
  })

  it('answers the same 404 for an absent one, another team\'s, another clinic\'s and a malformed id', async () => {
    const marking = await makeMarking(therapist, await freshStill())
    const answers = [
      await therapist.client.get(`/api/markings/${ABSENT}`), await colleague.client.get(`/api/markings/${marking.id}`),
      await stranger.client.get(`/api/markings/${marking.id}`), await therapist.client.get('/api/markings/1'),
    ]
    for (const answer of answers) expectError(answer, 404, 'marking-not-found')
    expect(new Set(answers.map(answer => JSON.stringify(comparable(answer)))).size).toBe(1)
  })

  it('answers 401 and 403', async () => {
    const marking = await makeMarking(therapist, await freshStill())
    expectError(await createClient().get(`/api/markings/${marking.id}`), 401, 'not-signed-in')
    for (const person of [await makeStudent(clinic), await makeAdministrator(clinic)]) expectError(await person.client.get(`/api/markings/${marking.id}`), 403, 'not-allowed')
  })
})

describe('GET /api/stills/:id/markings', () => {
  it('answers the current version of each', async () => {
    const stillId = await freshStill()
    const marking = await makeMarking(therapist, stillId)
    const saved = expectBody(await save(marking.id, { ...SAGITTAL_BODY, status: 'draft' }, 1), 200, MarkingSchema)
    expect(expectBody(await therapist.client.get(`/api/stills/${stillId}/markings`), 200, MarkingsSchema).items).toEqual([saved])
    expect(expectBody(await therapist.client.get(`/api/stills/${await freshStill()}/markings`), 200, MarkingsSchema).items).toEqual([])
  })

  it('answers 401, 403 and 404', async () => {
    const stillId = await freshStill()
    expectError(await createClient().get(`/api/stills/${stillId}/markings`), 401, 'not-signed-in')
    expectError(await (await makeStudent(clinic)).client.get(`/api/stills/${stillId}/markings`), 403, 'not-allowed')
    for (const person of [colleague, stranger]) expectError(await person.client.get(`/api/stills/${stillId}/markings`), 404, 'still-not-found')
    expectError(await therapist.client.get('/api/stills/first/markings'), 404, 'still-not-found')
  })
})

describe('what was marked', () => {
  it.each(['marking_version', 'reading'])('is not changed, deleted or emptied in %s, by the server\'s role or by the owner', async (table) => {
    await makeMarking(therapist, await freshStill())
    for (const as of ['app', 'owner'] as const) {
      for (const statement of [`update ${table} set clinic_id = clinic_id`, `delete from ${table}`, `truncate ${table} cascade`]) {
        expect(await refusalOf({ as, clinicId: clinic.id }, statement), `${as}: ${statement}`).toBe(as === 'app' ? '42501' : '23001')
      }
    }
  })
})
