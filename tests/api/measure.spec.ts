import { afterAll, describe, expect, it } from 'vitest'
import { MeasureAnswerSchema } from '#shared/schemas/marking'
import { expectBody, expectError, expectIssueAt } from '../fixtures/api/answers'
import { createClient } from '../fixtures/api/client'
import { closeDatabase, query } from '../fixtures/api/database'
import { FRONTAL_BODY, FRONTAL_READINGS, HYPEREXTENDED_BODY, ROLLED_BODY, valuesOf } from '../fixtures/api/marking-bodies'
import { makeAdministrator, makeClinic, makePatientAccount, makeStudent, makeTherapist } from '../fixtures/api/people'
import { makeMarking, makePatient, makeSession, makeStill } from '../fixtures/api/records'
import { TURNED_BY_THREE, WORKED_SAGITTAL, WORKED_SAGITTAL_READINGS } from '../reference/worked-values'

afterAll(closeDatabase)

const clinic = await makeClinic('measure')
const therapist = await makeTherapist(clinic)
const PICTURE = { width: 1080, height: 1080 }

const measure = (body: unknown, by = therapist) => by.client.post('/api/measure', body)
const readingsOf = async (body: unknown, by = therapist) => expectBody(await measure(body, by), 200, MeasureAnswerSchema).readings

describe('POST /api/measure', () => {
  it('answers the worked check values of the side view', async () => {
    const values = valuesOf(await readingsOf(WORKED_SAGITTAL))
    for (const [name, expected] of Object.entries(WORKED_SAGITTAL_READINGS)) expect(values[name], name).toBeCloseTo(expected, 3)
  })

  it('answers the worked check values of the front view, hyperextension and camera roll', async () => {
    const frontal = valuesOf(await readingsOf({ ...FRONTAL_BODY, ...PICTURE, view: 'frontal-anterior' }))
    for (const [name, expected] of Object.entries(FRONTAL_READINGS)) expect(frontal[name], name).toBeCloseTo(expected, 3)
    expect(valuesOf(await readingsOf({ ...HYPEREXTENDED_BODY, ...PICTURE, view: 'sagittal' })).kneeFlexion).toBeCloseTo(-9.1478, 3)
    expect(valuesOf(await readingsOf({ ...ROLLED_BODY, ...PICTURE, view: 'sagittal' })).trunkInclination).toBeCloseTo(7.8803, 3)
  })

  it('answers for the content turned by 3° what the specification says', async () => {
    const [cos, sin] = [Math.cos(3 * Math.PI / 180), Math.sin(3 * Math.PI / 180)]
    const turned = Object.fromEntries(Object.entries(WORKED_SAGITTAL.landmarks).map(([name, { x, y }]) => [name, { x: 540 + (x - 540) * cos - (y - 540) * sin, y: 540 + (x - 540) * sin + (y - 540) * cos }]))
    const values = valuesOf(await readingsOf({ ...WORKED_SAGITTAL, landmarks: turned }))
    for (const [name, expected] of Object.entries(TURNED_BY_THREE)) expect(values[name], name).toBeCloseTo(expected, 3)
  })

  it('answers what a saved marking of the same body holds', async () => {
    const { stillId } = await makeStill(therapist, await makeSession(therapist, (await makePatient(therapist)).id))
    expect(await readingsOf(WORKED_SAGITTAL)).toEqual((await makeMarking(therapist, stillId)).readings)
  })

  it('keeps nothing', async () => {
    const counts = () => query(clinic.id, 'select (select count(*) from marking) as m, (select count(*) from reading) as r, (select count(*) from audit_event) as a, (select count(*) from idempotency_key) as i')
    const before = await counts()
    await measure(WORKED_SAGITTAL)
    expect(await counts()).toEqual(before)
  })

  it('answers fewer readings for fewer landmarks, and none for none', async () => {
    const { acromion, greaterTrochanter } = WORKED_SAGITTAL.landmarks
    expect((await readingsOf({ ...WORKED_SAGITTAL, landmarks: { acromion, greaterTrochanter } })).map(reading => reading.measure)).toEqual(['trunkInclination'])
    expect(await readingsOf({ ...PICTURE, view: 'sagittal', landmarks: {} })).toEqual([])
  })

  it('is open to students, who practise with it', async () => {
    expect(valuesOf(await readingsOf(WORKED_SAGITTAL, await makeStudent(clinic))).kneeFlexion).toBeCloseTo(5.5917, 3)
  })

  it.each([
    ['no view', { view: undefined }, 'view'], ['an unknown view', { view: 'from-above' }, 'view'], ['no width', { width: undefined }, 'width'], ['a height of 0', { height: 0 }, 'height'],
    ['a width of 1e9', { width: 1e9 }, 'width'], ['half a pixel', { width: 10.5 }, 'width'], ['a picture smaller than the person', { width: 500 }, 'landmarks.tragus'],
    ['an unknown landmark', { landmarks: { nose: { x: 1, y: 1 } } }, 'landmarks.nose'], ['an unknown key', { stillId: 'x' }, ''],
  ])('answers 400 naming the field for %s', async (_what, fields, path) => {
    expectIssueAt(await measure({ ...WORKED_SAGITTAL, ...fields }), path)
  })

  it('names the faults that have a code of their own', async () => {
    const { heel: _heel, ...landmarks } = WORKED_SAGITTAL.landmarks
    expectIssueAt(await measure({ ...WORKED_SAGITTAL, facing: undefined, landmarks }), 'facing', 'facing-required')
    expectIssueAt(await measure({ ...WORKED_SAGITTAL, landmarks: { ...landmarks, c7: landmarks.tragus } }), 'landmarks.c7', 'landmarks-coincide')
    expectIssueAt(await measure({ ...WORKED_SAGITTAL, plumbLine: { top: { x: 1, y: 1 }, bottom: { x: 1, y: 300 } } }), 'plumbLine', 'plumb-line-too-short')
  })

  it('answers 401 and 403', async () => {
    expectError(await createClient().post('/api/measure', WORKED_SAGITTAL), 401, 'not-signed-in')
    expectError(await measure(WORKED_SAGITTAL, await makeAdministrator(clinic)), 403, 'not-allowed')
    expectError(await measure(WORKED_SAGITTAL, await makePatientAccount(clinic, (await makePatient(therapist)).id)), 403, 'not-allowed')
  })
})
