import sharp from 'sharp'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { Clip } from '#shared/schemas/clip'
import { ClipStillsSchema, StillSchema } from '#shared/schemas/still'
import type { NumberedClip } from '../fixtures/numbered/numbered-clips.mjs'
import { readFrameNumberFromImage } from '../fixtures/numbered/frame-number.mjs'
import { expectBody, expectError, expectIssueAt } from '../fixtures/api/answers'
import { beginUpload, getBytes, makeReadyClip, pickStill } from '../fixtures/api/clips'
import { auditOf, closeDatabase, query } from '../fixtures/api/database'
import { makeClinic, makeStudent, makeTherapist, type Clinic, type Person } from '../fixtures/api/people'
import { SMALL_BODY } from '../fixtures/api/marking-bodies'
import { makeConsent, makeMarking, makePatient, makeSession } from '../fixtures/api/records'
import { closeStorage, openStorage } from '../fixtures/api/storage'

let clinic: Clinic
let therapist: Person
let stranger: Person
let patientId: string
let sessionId: string
let clip: Clip
let made: NumberedClip

beforeAll(async () => {
  clinic = await makeClinic()
  therapist = await makeTherapist(clinic)
  stranger = await makeTherapist(clinic)
  patientId = (await makePatient(therapist)).id
  await makeConsent(therapist, patientId)
  sessionId = (await makeSession(therapist, patientId)).id;
  ({ clip, made } = await makeReadyClip(therapist, sessionId, 'variable-rate'))
}, 180_000)

afterAll(async () => {
  closeStorage()
  await closeDatabase()
})

describe('POST /api/clips/:id/stills', () => {
  it('picks a frame with its own time, and the same frame again gives the same still', async () => {
    const answer = await therapist.client.post(`/api/clips/${clip.id}/stills`, { frame: 7 })
    const still = expectBody(answer, 201, StillSchema)
    expect(still).toMatchObject({ clipId: clip.id, frame: 7, width: clip.width, height: clip.height })
    expect(Math.abs(still.timeUs - (made.presented[7]?.timeUs ?? NaN))).toBeLessThanOrEqual(6)
    expect(await pickStill(therapist, clip.id, 7)).toEqual(still)
    expect(await auditOf(clinic.id, { requestId: answer.headers.get('x-request-id') ?? '' })).toMatchObject([{ action: 'still.create', target_id: still.id, patient_id: patientId }])
    expect(expectBody(await therapist.client.get(`/api/stills/${still.id}`), 200, StillSchema)).toEqual(still)
  })

  it('makes one still when two people pick the same frame at once', async () => {
    const stills = await Promise.all([1, 2, 3, 4].map(() => pickStill(therapist, clip.id, 21)))
    expect(new Set(stills.map(still => still.id)).size).toBe(1)
  })

  it.each([[-1], [1.5], [null], ['3']])('answers 400 for frame %s', async (frame) => {
    expectIssueAt(await therapist.client.post(`/api/clips/${clip.id}/stills`, { frame }), 'frame')
  })

  it('answers 400 past the last frame', async () => {
    expectIssueAt(await therapist.client.post(`/api/clips/${clip.id}/stills`, { frame: made.presented.length }), 'frame')
    await pickStill(therapist, clip.id, made.presented.length - 1)
  })

  it('answers 409 before the clip is ready, 404 off the care team, 403 to a student', async () => {
    const open = await beginUpload(therapist, sessionId)
    expectError(await therapist.client.post(`/api/clips/${open.clip.id}/stills`, { frame: 0 }), 409, 'clip-not-ready')
    expectError(await stranger.client.post(`/api/clips/${clip.id}/stills`, { frame: 0 }), 404, 'clip-not-found')
    expectError(await (await makeStudent(clinic)).client.post(`/api/clips/${clip.id}/stills`, { frame: 0 }), 403, 'not-allowed')
  })
})

describe('GET /api/clips/:id/stills', () => {
  it('lists the stills by frame with the current version of each marking', async () => {
    const { clip: other } = await makeReadyClip(therapist, sessionId, 'turned-upside-down')
    const [late, early] = [await pickStill(therapist, other.id, 20), await pickStill(therapist, other.id, 3)]
    const marking = await makeMarking(therapist, late.id, { ...SMALL_BODY, status: 'draft' })
    const { items } = expectBody(await therapist.client.get(`/api/clips/${other.id}/stills`), 200, ClipStillsSchema)
    expect(items).toMatchObject([{ id: early.id, frame: 3, markings: [] }, { id: late.id, frame: 20, markings: [{ id: marking.id, version: 1, status: 'draft', author: therapist.name }] }])
    expectError(await stranger.client.get(`/api/clips/${other.id}/stills`), 404, 'clip-not-found')
  })
})

describe('GET /api/stills/:id/image', () => {
  it('cuts the frame once and gives the same picture again', async () => {
    const still = await pickStill(therapist, clip.id, 33)
    const answers = await Promise.all([1, 2, 3].map(() => getBytes(therapist, `/api/stills/${still.id}/image`)))
    const again = await getBytes(therapist, `/api/stills/${still.id}/image`)
    for (const answer of [...answers, again]) {
      expect(answer.status).toBe(200)
      expect(answer.bytes.equals(again.bytes)).toBe(true)
      expect(answer.headers.get('content-type')).toBe('image/png')
      expect(answer.headers.get('cache-control')).toBe('private, no-store')
      expect(answer.headers.get('content-length')).toBe(String(answer.bytes.length))
    }
    expect(await readFrameNumberFromImage(again.bytes)).toBe(made.presented[33]?.number)
    const [row] = await query<{ image_key: string }>(clinic.id, 'select image_key from still where id = $1', [still.id])
    expect((await openStorage().read(row?.image_key ?? '')).equals(again.bytes)).toBe(true)
    const etag = again.headers.get('etag') ?? ''
    expect((await getBytes(therapist, `/api/stills/${still.id}/image`, { 'if-none-match': etag })).status).toBe(304)
  })

  it('shows the colours of the review copy, in full size', async () => {
    const still = await pickStill(therapist, clip.id, 0)
    const { bytes } = await getBytes(therapist, `/api/stills/${still.id}/image`)
    expect(await sharp(bytes).metadata()).toMatchObject({ width: clip.width, height: clip.height, channels: 3 })
  })

  it('notes who saw it once in a sign-in', async () => {
    const still = await pickStill(therapist, clip.id, 40)
    for (let at = 0; at < 3; at += 1) await getBytes(therapist, `/api/stills/${still.id}/image`)
    expect((await auditOf(clinic.id, { action: 'still.view' })).filter(line => line.target_id === still.id)).toMatchObject([{ actor_id: therapist.id, patient_id: patientId }])
  })

  it('is 404 off the care team and for what is no still, 403 to a student and to other sites', async () => {
    const still = await pickStill(therapist, clip.id, 1)
    for (const end of ['', '/image']) {
      expectError(await stranger.client.get(`/api/stills/${still.id}${end}`), 404, 'still-not-found')
      expectError(await therapist.client.get(`/api/stills/${clip.id}${end}`), 404, 'still-not-found')
      expectError(await therapist.client.get(`/api/stills/17${end}`), 404, 'still-not-found')
      expectError(await (await makeStudent(clinic)).client.get(`/api/stills/${still.id}${end}`), 403, 'not-allowed')
    }
    expectError(await therapist.client.get(`/api/stills/${still.id}/image`, { headers: { 'sec-fetch-site': 'cross-site', 'sec-fetch-dest': 'image' } }), 403, 'cross-origin')
  })
})
