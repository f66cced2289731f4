import { randomBytes } from 'node:crypto'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { ClipAnswerSchema, ClipCreatedSchema, UploadPartsSchema, UploadStateSchema } from '#shared/schemas/clip'
import { makeNumberedClip } from '../fixtures/numbered/numbered-clips.mjs'
import { expectBody, expectError, expectIssueAt } from '../fixtures/api/answers'
import { beginUpload, clipBody, fileOf, putParts, readClip, uploadClip, waitForClip } from '../fixtures/api/clips'
import { auditOf, closeDatabase, query } from '../fixtures/api/database'
import { makeClinic, makeStudent, makeTherapist, type Clinic, type Person } from '../fixtures/api/people'
import { makeBout, makeConsent, makePatient, makeSession } from '../fixtures/api/records'
import { closeStorage, openStorage } from '../fixtures/api/storage'

const PART = 8 * 1024 * 1024
let clinic: Clinic
let therapist: Person
let stranger: Person
let sessionId: string
let patientId: string

async function originalKey(clipId: string): Promise<string> {
  const [row] = await query<{ original_key: string }>(clinic.id, 'select original_key from clip where id = $1', [clipId])
  return row?.original_key ?? ''
}

beforeAll(async () => {
  clinic = await makeClinic()
  therapist = await makeTherapist(clinic)
  stranger = await makeTherapist(clinic)
  const patient = await makePatient(therapist)
  patientId = patient.id
  await makeConsent(therapist, patient.id)
  sessionId = (await makeSession(therapist, patient.id)).id
})

afterAll(async () => {
  closeStorage()
  await closeDatabase()
})

describe('POST /api/sessions/:id/clips', () => {
  it('plans the parts and keeps what was said of the clip', async () => {
    const answer = await therapist.client.post(`/api/sessions/${sessionId}/clips`, clipBody({ size: 2 * PART + 5, recordedAt: '2026-11-02T10:15:00+01:00' }))
    const { clip, upload } = expectBody(answer, 201, ClipCreatedSchema)
    expect(upload).toEqual({ partSize: PART, partCount: 3 })
    expect(clip).toMatchObject({ sessionId, patientId, status: 'uploading', reason: null, view: 'sagittal', side: 'left', size: 2 * PART + 5, recordedAt: '2026-11-02T09:15:00.000Z', width: null, frameCount: null })
    const requestId = answer.headers.get('x-request-id') ?? ''
    expect(await auditOf(clinic.id, { requestId })).toMatchObject([{ action: 'clip.create', actor_id: therapist.id, target_type: 'clip', target_id: clip.id, patient_id: patientId }])
  })

  it('names its object without a word about the patient, the clinic or the file', async () => {
    const { clip } = await beginUpload(therapist, sessionId, { fileName: 'Ines Sandqvist 14.03.1958.mp4' })
    expect(await originalKey(clip.id)).toMatch(new RegExp(`^q/${clip.id}/[0-9a-f]{32}$`))
  })

  it('ties the clip to a bout of that session and to no other', async () => {
    const bout = await makeBout(therapist, sessionId, 0)
    expect((await beginUpload(therapist, sessionId, { boutId: bout.id })).clip.boutId).toBe(bout.id)
    const other = await makeSession(therapist, patientId)
    expectError(await therapist.client.post(`/api/sessions/${other.id}/clips`, clipBody({ boutId: bout.id })), 404, 'bout-not-found')
  })

  it('gives the first answer again for the same Idempotency-Key and leaves one clip', async () => {
    const body = clipBody({ fileName: 'twice.mp4' })
    const first = await therapist.client.post(`/api/sessions/${sessionId}/clips`, body, { idempotencyKey: 'one-clip' })
    const second = await therapist.client.post(`/api/sessions/${sessionId}/clips`, body, { idempotencyKey: 'one-clip' })
    expect(second.json).toEqual(first.json)
    expect(await query(clinic.id, 'select id from clip where file_name = $1', ['twice.mp4'])).toHaveLength(1)
  })

  it.each([
    ['an empty file', { size: 0 }, 'size'],
    ['a size below zero', { size: -1 }, 'size'],
    ['a view that does not exist', { view: 'from-above' }, 'view'],
    ['a file name with a line break', { fileName: 'a\r\nb.mp4' }, 'fileName'],
    ['a file without a name', { fileName: '' }, 'fileName'],
  ])('answers 400 for %s and names the field', async (_what, fields, path) => {
    expectIssueAt(await therapist.client.post(`/api/sessions/${sessionId}/clips`, clipBody(fields)), path)
  })

  it('answers 413 above 2 GB and takes exactly 2 GB', async () => {
    expectError(await therapist.client.post(`/api/sessions/${sessionId}/clips`, clipBody({ size: 2 * 1024 ** 3 + 1 })), 413, 'clip-too-large')
    expect((await beginUpload(therapist, sessionId, { size: 2 * 1024 ** 3 })).upload.partCount).toBe(256)
  })

  it('answers 415 for what is no clip and takes a recorder\'s type with its codecs', async () => {
    expectError(await therapist.client.post(`/api/sessions/${sessionId}/clips`, clipBody({ contentType: 'image/png' })), 415, 'unsupported-content-type')
    expect((await beginUpload(therapist, sessionId, { contentType: 'video/webm;codecs=vp9' })).clip.contentType).toBe('video/webm')
  })

  it('answers 409 without consent to recording, also after it was withdrawn', async () => {
    const patient = await makePatient(therapist)
    const session = await makeSession(therapist, patient.id)
    expectError(await therapist.client.post(`/api/sessions/${session.id}/clips`, clipBody()), 409, 'no-recording-consent')
    await makeConsent(therapist, patient.id, { kind: 'teaching' })
    expectError(await therapist.client.post(`/api/sessions/${session.id}/clips`, clipBody()), 409, 'no-recording-consent')
    const consent = await makeConsent(therapist, patient.id)
    await beginUpload(therapist, session.id)
    expect((await therapist.client.delete(`/api/consents/${consent.id}`)).status).toBe(200)
    expectError(await therapist.client.post(`/api/sessions/${session.id}/clips`, clipBody()), 409, 'no-recording-consent')
  })

  it('answers 404 for a session of people that are not on their care team, and 403 to a student', async () => {
    expectError(await stranger.client.post(`/api/sessions/${sessionId}/clips`, clipBody()), 404, 'session-not-found')
    expectError(await (await makeStudent(clinic)).client.post(`/api/sessions/${sessionId}/clips`, clipBody()), 403, 'not-allowed')
  })
})

describe('the parts of an upload', () => {
  it('go on after a break: what is there is listed and need not be sent again', async () => {
    const file = randomBytes(2 * PART + 77)
    const { clip, upload } = await beginUpload(therapist, sessionId, { size: file.length })
    const [second] = await putParts(therapist, clip.id, file, upload.partSize, [2])
    const state = expectBody(await therapist.client.get(`/api/clips/${clip.id}/upload`), 200, UploadStateSchema)
    expect(state).toEqual({ partSize: PART, partCount: 3, parts: [{ partNumber: 2, size: PART, etag: second?.etag.replaceAll('"', '') }] })
    const rest = await putParts(therapist, clip.id, file, upload.partSize, [1, 3])
    const all = expectBody(await therapist.client.get(`/api/clips/${clip.id}/upload`), 200, UploadStateSchema)
    expect(all.parts.map(part => [part.partNumber, part.size])).toEqual([[1, PART], [2, PART], [3, 77]])
    // Random bytes are no clip, but they are joined in order and whole before that is said.
    const parts = [...rest, ...(second ? [second] : [])]
    const done = expectBody(await therapist.client.post(`/api/clips/${clip.id}/upload/complete`, { parts }), 202, ClipAnswerSchema)
    expect(done.clip).toMatchObject({ status: 'refused', reason: 'not-a-video' })
  })

  it('are taken at their exact length only', async () => {
    const { clip } = await beginUpload(therapist, sessionId, { size: 1000 })
    const { parts: [part] } = expectBody(await therapist.client.post(`/api/clips/${clip.id}/upload/parts`, { partNumbers: [1] }), 200, UploadPartsSchema)
    for (const length of [999, 1001, 5_000_000]) expect((await fetch(part?.url ?? '', { method: 'PUT', body: new Uint8Array(length) })).status).toBe(403)
    expect((await fetch(part?.url ?? '', { method: 'PUT', body: new Uint8Array(1000) })).status).toBe(200)
  })

  it.each([
    ['a part past the last', [4]], ['part 0', [0]], ['a fraction', [1.5]], ['nothing', []], ['a word', ['1']],
  ])('answers 400 for %s', async (_what, partNumbers) => {
    const { clip } = await beginUpload(therapist, sessionId, { size: 3 * PART })
    expectError(await therapist.client.post(`/api/clips/${clip.id}/upload/parts`, { partNumbers }), 400, 'validation-failed')
  })

  it('are not for others: 404 on every address of the upload', async () => {
    const { clip } = await beginUpload(therapist, sessionId)
    expectError(await stranger.client.get(`/api/clips/${clip.id}/upload`), 404, 'clip-not-found')
    expectError(await stranger.client.post(`/api/clips/${clip.id}/upload/parts`, { partNumbers: [1] }), 404, 'clip-not-found')
    expectError(await stranger.client.post(`/api/clips/${clip.id}/upload/complete`, { parts: [{ partNumber: 1, etag: 'x' }] }), 404, 'clip-not-found')
    expectError(await stranger.client.delete(`/api/clips/${clip.id}`), 404, 'clip-not-found')
  })

  it('are signed no more once consent is withdrawn', async () => {
    const patient = await makePatient(therapist)
    const consent = await makeConsent(therapist, patient.id)
    const { clip } = await beginUpload(therapist, (await makeSession(therapist, patient.id)).id)
    await therapist.client.delete(`/api/consents/${consent.id}`)
    expectError(await therapist.client.post(`/api/clips/${clip.id}/upload/parts`, { partNumbers: [1] }), 409, 'no-recording-consent')
    expectError(await therapist.client.post(`/api/clips/${clip.id}/upload/complete`, { parts: [{ partNumber: 1, etag: 'x' }] }), 409, 'no-recording-consent')
  })
})

describe('POST /api/clips/:id/upload/complete', () => {
  it('names the parts that are missing, of the list and of the storage', async () => {
    const file = randomBytes(2 * PART + 10)
    const { clip, upload } = await beginUpload(therapist, sessionId, { size: file.length })
    const [first] = await putParts(therapist, clip.id, file, upload.partSize, [1])
    const missing = expectError(await therapist.client.post(`/api/clips/${clip.id}/upload/complete`, { parts: [first] }), 409, 'part-missing')
    expect(missing.issues?.map(issue => issue.path)).toEqual(['parts.2', 'parts.3'])
    const unsent = expectError(await therapist.client.post(`/api/clips/${clip.id}/upload/complete`, { parts: [first, { partNumber: 2, etag: 'a' }, { partNumber: 3, etag: 'b' }] }), 409, 'part-missing')
    expect(unsent.issues?.map(issue => issue.path)).toEqual(['parts.2', 'parts.3'])
    expect((await readClip(therapist, clip.id)).status).toBe('uploading')
  })

  it('refuses a wrong etag and takes the right one afterwards, with quotes or without', async () => {
    const made = await fileOf(await makeNumberedClip('turned-upside-down'))
    const { clip, upload } = await beginUpload(therapist, sessionId, { size: made.bytes.length })
    const [part] = await putParts(therapist, clip.id, made.bytes, upload.partSize, [1])
    const wrong = expectError(await therapist.client.post(`/api/clips/${clip.id}/upload/complete`, { parts: [{ partNumber: 1, etag: 'd41d8cd98f00b204e9800998ecf8427e' }] }), 409, 'etag-mismatch')
    expect(wrong.issues?.map(issue => issue.path)).toEqual(['parts.1'])
    const answer = await therapist.client.post(`/api/clips/${clip.id}/upload/complete`, { parts: [{ partNumber: 1, etag: part?.etag.replaceAll('"', '') }] })
    expect(expectBody(answer, 202, ClipAnswerSchema).clip.status).toBe('processing')
  })

  it.each([
    ['a part twice', [{ partNumber: 1, etag: 'a' }, { partNumber: 1, etag: 'a' }]], ['a part past the last', [{ partNumber: 9, etag: 'a' }]], ['no parts', []],
  ])('answers 400 for %s', async (_what, parts) => {
    const { clip } = await beginUpload(therapist, sessionId, { size: 2 * PART })
    expectError(await therapist.client.post(`/api/clips/${clip.id}/upload/complete`, { parts }), 400, 'validation-failed')
  })

  it('answers the same clip when asked twice, also at once, and queues one job', async () => {
    const made = await fileOf(await makeNumberedClip('turned-upside-down'))
    const { clip, upload } = await beginUpload(therapist, sessionId, { size: made.bytes.length })
    const parts = await putParts(therapist, clip.id, made.bytes, upload.partSize, [1])
    const answers = await Promise.all([1, 2, 3].map(() => therapist.client.post(`/api/clips/${clip.id}/upload/complete`, { parts })))
    for (const answer of answers) expect(expectBody(answer, 202, ClipAnswerSchema).clip.id).toBe(clip.id)
    const ready = await waitForClip(therapist, clip.id)
    expect(ready.status).toBe('ready')
    const again = expectBody(await therapist.client.post(`/api/clips/${clip.id}/upload/complete`, { parts }), 202, ClipAnswerSchema)
    expect(again.clip).toEqual(ready)
    expect(await auditOf(clinic.id, { action: 'clip.upload' }).then(rows => rows.filter(row => row.target_id === clip.id))).toHaveLength(1)
    expect(await query(clinic.id, 'select attempt from clip where id = $1', [clip.id])).toEqual([{ attempt: 1 }])
  })

  it('refuses a file that is shorter than was declared, and nothing of it stays', async () => {
    // The storage takes no other length for a part; a whole object of another size can only come from a faulty store.
    const made = await fileOf(await makeNumberedClip('turned-upside-down'))
    const { clip, upload } = await beginUpload(therapist, sessionId, { size: made.bytes.length })
    const parts = await putParts(therapist, clip.id, made.bytes, upload.partSize, [1])
    await query(clinic.id, 'update clip set size = size + 1 where id = $1', [clip.id])
    const done = expectBody(await therapist.client.post(`/api/clips/${clip.id}/upload/complete`, { parts }), 202, ClipAnswerSchema)
    expect(done.clip).toMatchObject({ status: 'refused', reason: 'size-mismatch' })
    const key = await originalKey(clip.id)
    await expect.poll(() => openStorage().head(key), { timeout: 20_000, interval: 300 }).toBeNull()
    expectError(await therapist.client.post(`/api/clips/${clip.id}/upload/complete`, { parts }), 409, 'upload-not-open')
  })
})

describe('DELETE /api/clips/:id of an open upload', () => {
  it('drops the row and the parts, and the trail says so', async () => {
    const file = randomBytes(1234)
    const { clip, upload } = await beginUpload(therapist, sessionId, { size: file.length })
    await putParts(therapist, clip.id, file, upload.partSize, [1])
    const [row] = await query<{ original_key: string, upload_id: string }>(clinic.id, 'select original_key, upload_id from clip where id = $1', [clip.id])
    const answer = await therapist.client.delete(`/api/clips/${clip.id}`)
    expect(answer.status).toBe(204)
    expectError(await therapist.client.get(`/api/clips/${clip.id}`), 404, 'clip-not-found')
    expectError(await therapist.client.post(`/api/clips/${clip.id}/upload/parts`, { partNumbers: [1] }), 404, 'clip-not-found')
    const listed = () => openStorage().listParts({ key: row?.original_key ?? '', uploadId: row?.upload_id ?? '' }).then(() => 'open', (error: unknown) => error instanceof Error && 'kind' in error ? error.kind : 'failed')
    await expect.poll(listed, { timeout: 20_000, interval: 300 }).toBe('absent')
    expect(await auditOf(clinic.id, { requestId: answer.headers.get('x-request-id') ?? '' })).toMatchObject([{ action: 'clip.cancel', target_id: clip.id, patient_id: patientId }])
  })
})

describe('a file of several parts', () => {
  it('is joined to the very bytes that were sent', async () => {
    const made = await fileOf(await makeNumberedClip('constant-25'))
    // A box that readers skip makes the clip as long as two parts and a bit.
    const padding = Buffer.alloc(2 * PART, 7)
    padding.writeUInt32BE(padding.length, 0)
    padding.write('free', 4, 'latin1')
    const bytes = Buffer.concat([made.bytes, padding])
    const clip = await waitForClip(therapist, (await uploadClip(therapist, sessionId, { ...made, bytes })).id)
    expect(clip.status).toBe('ready')
    expect((await openStorage().read(await originalKey(clip.id))).equals(bytes)).toBe(true)
  })
})
