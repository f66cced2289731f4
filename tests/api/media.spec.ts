import { request } from 'node:http'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { Clip } from '#shared/schemas/clip'
import { createClient } from '../fixtures/api/client'
import { expectError } from '../fixtures/api/answers'
import { beginUpload, getBytes, makeReadyClip } from '../fixtures/api/clips'
import { auditOf, closeDatabase, query } from '../fixtures/api/database'
import { stack } from '../fixtures/api/environment'
import { makeAdministrator, makeClinic, makeStudent, makeTherapist, signIn, type Clinic, type Person } from '../fixtures/api/people'
import { makeConsent, makePatient, makeSession } from '../fixtures/api/records'
import { closeStorage, openStorage } from '../fixtures/api/storage'

let clinic: Clinic
let therapist: Person
let stranger: Person
let patientId: string
let sessionId: string
let clip: Clip
let path: string
/** The object itself, read past the server. */
let whole: Buffer

beforeAll(async () => {
  clinic = await makeClinic()
  therapist = await makeTherapist(clinic)
  stranger = await makeTherapist(clinic)
  patientId = (await makePatient(therapist)).id
  await makeConsent(therapist, patientId)
  sessionId = (await makeSession(therapist, patientId)).id
  clip = (await makeReadyClip(therapist, sessionId, 'constant-25')).clip
  path = `/api/clips/${clip.id}/media`
  const [row] = await query<{ review_key: string }>(clinic.id, 'select review_key from clip where id = $1', [clip.id])
  whole = await openStorage().read(row?.review_key ?? '')
}, 180_000)

afterAll(async () => {
  closeStorage()
  await closeDatabase()
})

describe('GET /api/clips/:id/media', () => {
  it('gives the whole review copy without a range', async () => {
    const { status, headers, bytes } = await getBytes(therapist, path)
    expect(status).toBe(200)
    expect(bytes.equals(whole)).toBe(true)
    expect(headers.get('content-length')).toBe(String(whole.length))
    expect(headers.get('accept-ranges')).toBe('bytes')
  })

  it.each([
    ['bytes=0-', (size: number) => [0, size - 1]],
    ['bytes=0-0', () => [0, 0]],
    ['bytes=-1', (size: number) => [size - 1, size - 1]],
    ['bytes=1000-1999', () => [1000, 1999]],
    ['bytes=-5000', (size: number) => [size - 5000, size - 1]],
    ['bytes=100-99999999', (size: number) => [100, size - 1]],
  ])('answers %s with exactly that part', async (range, expected) => {
    const [start = 0, end = 0] = expected(whole.length)
    const { status, headers, bytes } = await getBytes(therapist, path, { range })
    expect(status).toBe(206)
    expect(headers.get('content-range')).toBe(`bytes ${start}-${end}/${whole.length}`)
    expect(headers.get('content-length')).toBe(String(end - start + 1))
    expect(bytes.equals(whole.subarray(start, end + 1))).toBe(true)
  })

  it.each([['bytes=99999999-'], ['bytes=-0']])('answers 416 for %s and says how long the clip is', async (range) => {
    const answer = await therapist.client.get(path, { headers: { range } })
    expectError(answer, 416, 'range-not-satisfiable')
    expect(answer.headers.get('content-range')).toBe(`bytes */${whole.length}`)
  })

  it.each([['bytes=0-0,-1'], ['bytes=5-2'], ['chapters=1-2'], ['bytes=x']])('gives the whole for %s', async (range) => {
    const { status, bytes } = await getBytes(therapist, path, { range })
    expect(status).toBe(200)
    expect(bytes.equals(whole)).toBe(true)
  })

  it('answers a range only as long as its If-Range fits', async () => {
    const etag = (await getBytes(therapist, path, { range: 'bytes=0-0' })).headers.get('etag') ?? ''
    expect(etag).toMatch(/^"[^"]+"$/)
    expect((await getBytes(therapist, path, { 'range': 'bytes=0-9', 'if-range': etag })).status).toBe(206)
    expect((await getBytes(therapist, path, { 'range': 'bytes=0-9', 'if-range': '"another"' })).status).toBe(200)
    expect((await getBytes(therapist, path, { 'if-none-match': etag })).status).toBe(304)
  })

  it('is kept by no cache, runs nothing, and names the patient nowhere', async () => {
    const { headers } = await getBytes(therapist, path, { range: 'bytes=0-0' })
    expect(headers.get('content-type')).toBe('video/mp4')
    expect(headers.get('cache-control')).toBe('private, no-store')
    expect(headers.get('content-security-policy')).toBe('default-src \'none\'; sandbox')
    expect(headers.get('x-content-type-options')).toBe('nosniff')
    expect(headers.get('cross-origin-resource-policy')).toBe('same-origin')
    expect(headers.get('content-disposition')).toBe(`inline; filename="clip-${clip.id.slice(-8)}.mp4"`)
  })

  it('is for our own pages: not for another site\'s, nor to be run as one', async () => {
    for (const headers of [{ 'sec-fetch-site': 'cross-site' }, { 'sec-fetch-site': 'same-site' }, { 'sec-fetch-site': 'same-origin', 'sec-fetch-dest': 'script' }, { 'sec-fetch-site': 'same-origin', 'sec-fetch-dest': 'iframe' }]) {
      expectError(await therapist.client.get(path, { headers }), 403, 'cross-origin')
    }
    for (const destination of ['video', 'empty']) expect((await getBytes(therapist, path, { 'range': 'bytes=0-0', 'sec-fetch-site': 'same-origin', 'sec-fetch-dest': destination })).status).toBe(206)
  })

  it('notes who saw it once in a sign-in, before the first byte', async () => {
    const viewer = await makeTherapist(clinic)
    await therapist.client.post(`/api/patients/${patientId}/care-team`, { userId: viewer.id })
    const lines = async () => (await auditOf(clinic.id, { action: 'clip.view' })).filter(line => line.actor_id === viewer.id)
    for (let at = 0; at < 5; at += 1) await getBytes(viewer, path, { range: `bytes=${at * 100}-${at * 100 + 99}` })
    await getBytes(viewer, `/api/clips/${clip.id}/filmstrip`)
    expect(await lines()).toMatchObject([{ target_type: 'clip', target_id: clip.id, patient_id: patientId }])
    await signIn(viewer)
    await getBytes(viewer, path, { range: 'bytes=0-0' })
    expect(await lines()).toHaveLength(2)
    expect((await auditOf(clinic.id, { action: 'clip.preview' })).filter(line => line.actor_id === viewer.id)).toHaveLength(0)
    await getBytes(viewer, `/api/clips/${clip.id}/poster`)
    expect((await auditOf(clinic.id, { action: 'clip.preview' })).filter(line => line.actor_id === viewer.id)).toHaveLength(1)
  })

  it('ends with the session and with the care team', async () => {
    const viewer = await makeTherapist(clinic)
    expectError(await viewer.client.get(path), 404, 'clip-not-found')
    await therapist.client.post(`/api/patients/${patientId}/care-team`, { userId: viewer.id })
    expect((await getBytes(viewer, path, { range: 'bytes=0-0' })).status).toBe(206)
    await therapist.client.delete(`/api/patients/${patientId}/care-team/${viewer.id}`)
    expectError(await viewer.client.get(path), 404, 'clip-not-found')
    await therapist.client.post(`/api/patients/${patientId}/care-team`, { userId: viewer.id })
    const stolen = createClient({ cookies: new Map(viewer.client.cookies) })
    expect((await stolen.get(path, { headers: { range: 'bytes=0-0' } })).status).toBe(206)
    expect((await viewer.client.post('/api/auth/sign-out')).status).toBe(204)
    expectError(await stolen.get(path), 401, 'not-signed-in')
  })

  it('serves on after a browser went away in the middle', async () => {
    const cookie = [...therapist.client.cookies].map(([name, value]) => `${name}=${value}`).join('; ')
    for (let turn = 0; turn < 20; turn += 1) {
      await new Promise<void>((resolve, reject) => {
        const asked = request(new URL(path, stack.baseUrl), { headers: { cookie } }, (answer) => {
          answer.once('data', () => {
            answer.destroy()
            resolve()
          })
          answer.on('error', () => resolve())
        })
        asked.on('error', reject)
        asked.end()
      })
    }
    expect((await getBytes(therapist, path)).bytes.equals(whole)).toBe(true)
  })
})

describe('media, frames, poster and filmstrip', () => {
  const ENDS = ['media', 'frames', 'poster', 'filmstrip', 'filmstrip.json']

  it('are 401 without a session, 403 to a student and an administrator, 404 to people off the care team', async () => {
    const [student, administrator] = [await makeStudent(clinic), await makeAdministrator(clinic)]
    for (const end of ENDS) {
      expectError(await createClient().get(`/api/clips/${clip.id}/${end}`), 401, 'not-signed-in')
      expectError(await student.client.get(`/api/clips/${clip.id}/${end}`), 403, 'not-allowed')
      expectError(await administrator.client.get(`/api/clips/${clip.id}/${end}`), 403, 'not-allowed')
      expectError(await stranger.client.get(`/api/clips/${clip.id}/${end}`), 404, 'clip-not-found')
      expectError(await therapist.client.get(`/api/clips/not-an-id/${end}`), 404, 'clip-not-found')
    }
  })

  it('are 409 until the clip is ready', async () => {
    const open = await beginUpload(therapist, sessionId)
    for (const end of ENDS) expectError(await therapist.client.get(`/api/clips/${open.clip.id}/${end}`), 409, 'clip-not-ready')
  })
})
