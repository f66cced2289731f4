import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { ClipListSchema } from '#shared/schemas/clip'
import { createClient } from '../fixtures/api/client'
import { expectBody, expectError, expectIssueAt } from '../fixtures/api/answers'
import { beginUpload, getBytes, makeReadyClip, pickStill, readClip } from '../fixtures/api/clips'
import { auditOf, closeDatabase, query } from '../fixtures/api/database'
import { makeAdministrator, makeClinic, makeStudent, makeTherapist, type Clinic, type Person } from '../fixtures/api/people'
import { SMALL_BODY } from '../fixtures/api/marking-bodies'
import { makeConsent, makeMarking, makePatient, makeSession } from '../fixtures/api/records'
import { closeStorage, openStorage } from '../fixtures/api/storage'

let clinic: Clinic
let therapist: Person
let stranger: Person
let foreigner: Person
let patientId: string
let sessionId: string

beforeAll(async () => {
  clinic = await makeClinic()
  therapist = await makeTherapist(clinic)
  stranger = await makeTherapist(clinic)
  foreigner = await makeTherapist(await makeClinic())
  patientId = (await makePatient(therapist)).id
  await makeConsent(therapist, patientId)
  sessionId = (await makeSession(therapist, patientId)).id
})

afterAll(async () => {
  closeStorage()
  await closeDatabase()
})

describe('the lists of clips', () => {
  it('hold a session\'s and a patient\'s clips, newest first, by pages', async () => {
    const other = await makeSession(therapist, patientId)
    const ids: string[] = []
    for (const at of [sessionId, sessionId, other.id]) ids.push((await beginUpload(therapist, at)).clip.id)
    const ofSession = expectBody(await therapist.client.get(`/api/sessions/${sessionId}/clips`), 200, ClipListSchema)
    expect(ofSession.items.map(clip => clip.id)).toEqual([ids[1], ids[0]])
    const ofPatient = expectBody(await therapist.client.get(`/api/patients/${patientId}/clips?pageSize=2&page=1`), 200, ClipListSchema)
    expect(ofPatient).toMatchObject({ total: 3, page: 1, pageSize: 2 })
    expect(ofPatient.items.map(clip => clip.id)).toEqual([ids[2], ids[1]])
    const second = expectBody(await therapist.client.get(`/api/patients/${patientId}/clips?pageSize=2&page=2`), 200, ClipListSchema)
    expect(second.items.map(clip => clip.id)).toEqual([ids[0]])
  })

  it('refuse a page of more than 200', async () => {
    expectIssueAt(await therapist.client.get(`/api/sessions/${sessionId}/clips?pageSize=201`), 'pageSize')
    expectIssueAt(await therapist.client.get(`/api/patients/${patientId}/clips?pageSize=0`), 'pageSize')
  })

  it('are 401 without a session, 403 to students and administrators, 404 off the care team and in another clinic', async () => {
    for (const [path, code] of [[`/api/sessions/${sessionId}/clips`, 'session-not-found'], [`/api/patients/${patientId}/clips`, 'patient-not-found']] as const) {
      expectError(await createClient().get(path), 401, 'not-signed-in')
      expectError(await (await makeStudent(clinic)).client.get(path), 403, 'not-allowed')
      expectError(await (await makeAdministrator(clinic)).client.get(path), 403, 'not-allowed')
      expectError(await stranger.client.get(path), 404, code)
      expectError(await foreigner.client.get(path), 404, code)
    }
  })
})

describe('GET /api/clips/:id', () => {
  it('counts stills and markings', async () => {
    const { clip } = await makeReadyClip(therapist, sessionId, 'turned-upside-down')
    expect(clip).toMatchObject({ stillCount: 0, markingCount: 0 })
    const still = await pickStill(therapist, clip.id, 4)
    await pickStill(therapist, clip.id, 9)
    await makeMarking(therapist, still.id, { ...SMALL_BODY, status: 'draft' })
    expect(await readClip(therapist, clip.id)).toMatchObject({ stillCount: 2, markingCount: 1 })
  })

  it('says nothing of where its objects lie', async () => {
    const { clip } = await beginUpload(therapist, sessionId)
    const { text } = await therapist.client.get(`/api/clips/${clip.id}`)
    expect(text).not.toMatch(/key|q\/|uploadId|attempt|lease/i)
  })

  it('is open to one who opened the chart with a reason', async () => {
    const { clip } = await beginUpload(therapist, sessionId)
    expectError(await stranger.client.get(`/api/clips/${clip.id}`), 404, 'clip-not-found')
    expect((await stranger.client.post(`/api/patients/${patientId}/openings`, { reason: 'Covering the ward this afternoon' })).status).toBe(201)
    expect((await stranger.client.get(`/api/clips/${clip.id}`)).status).toBe(200)
    expectError(await foreigner.client.get(`/api/clips/${clip.id}`), 404, 'clip-not-found')
  })
})

describe('DELETE /api/clips/:id', () => {
  it('removes a clip with its stills and every byte of it, and the trail says so', async () => {
    const { clip } = await makeReadyClip(therapist, sessionId, 'turned-upside-down')
    const still = await pickStill(therapist, clip.id, 2)
    await getBytes(therapist, `/api/stills/${still.id}/image`)
    const [row] = await query<Record<string, string>>(clinic.id, 'select original_key, review_key, poster_key, filmstrip_key, (select image_key from still where clip_id = clip.id) as image_key from clip where id = $1', [clip.id])
    const keys = Object.values(row ?? {})
    for (const key of keys) expect(await openStorage().head(key)).not.toBeNull()
    const answer = await therapist.client.delete(`/api/clips/${clip.id}`)
    expect(answer.status).toBe(204)
    expectError(await therapist.client.get(`/api/clips/${clip.id}`), 404, 'clip-not-found')
    expectError(await therapist.client.get(`/api/stills/${still.id}/image`), 404, 'still-not-found')
    for (const key of keys) await expect.poll(() => openStorage().head(key), { timeout: 30_000, interval: 300 }).toBeNull()
    expect(await auditOf(clinic.id, { requestId: answer.headers.get('x-request-id') ?? '' })).toMatchObject([{ action: 'clip.remove', target_id: clip.id, patient_id: patientId, before: { status: 'ready' } }])
  })

  it('leaves a marked clip as it is', async () => {
    const { clip } = await makeReadyClip(therapist, sessionId, 'turned-upside-down')
    await makeMarking(therapist, (await pickStill(therapist, clip.id, 2)).id, { ...SMALL_BODY, status: 'draft' })
    expectError(await therapist.client.delete(`/api/clips/${clip.id}`), 409, 'clip-has-markings')
    expect(await readClip(therapist, clip.id)).toMatchObject({ status: 'ready', stillCount: 1, markingCount: 1 })
  })

  it('is 401 without a session, 403 to a student, 404 in another clinic', async () => {
    const { clip } = await beginUpload(therapist, sessionId)
    expectError(await createClient().delete(`/api/clips/${clip.id}`), 401, 'not-signed-in')
    expectError(await (await makeStudent(clinic)).client.delete(`/api/clips/${clip.id}`), 403, 'not-allowed')
    expectError(await foreigner.client.delete(`/api/clips/${clip.id}`), 404, 'clip-not-found')
  })
})
