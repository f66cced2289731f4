import { execFile } from 'node:child_process'
import { createServer, type Server } from 'node:http'
import { mkdtemp, readdir, rm, writeFile } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { promisify } from 'node:util'
import sharp from 'sharp'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { FilmstripSchema, FrameTableSchema, type Clip } from '#shared/schemas/clip'
import { BAD_INPUTS, makeBadInput } from '../fixtures/bad/bad-inputs.mjs'
import { readFrameNumber, readFrameNumberFromImage } from '../fixtures/numbered/frame-number.mjs'
import { makeNumberedClip, NUMBERED_CLIPS } from '../fixtures/numbered/numbered-clips.mjs'
import { expectBody, expectError } from '../fixtures/api/answers'
import { clipBody, fileOf, getBytes, makeReadyClip, pickStill, readClip, uploadClip, waitForClip } from '../fixtures/api/clips'
import { auditOf, closeDatabase, query } from '../fixtures/api/database'
import { makeClinic, makeTherapist, type Clinic, type Person } from '../fixtures/api/people'
import { makeConsent, makePatient, makeSession } from '../fixtures/api/records'
import { closeStorage, openStorage } from '../fixtures/api/storage'

const run = promisify(execFile)
let clinic: Clinic
let therapist: Person
let patientId: string
let sessionId: string
let folder: string

/** What ffprobe, which the fixtures are not made with the server's code for, says of a review copy. */
async function probe(bytes: Buffer, name: string) {
  const path = join(folder, `${name}.mp4`)
  await writeFile(path, bytes)
  const { stdout } = await run('ffprobe', ['-v', 'error', '-show_entries', 'format=nb_streams:format_tags:stream=codec_name,codec_type,pix_fmt,width,height,has_b_frames,start_time:stream_tags:stream_side_data=rotation:packet=pts_time,flags', '-of', 'json', path], { maxBuffer: 1 << 26 })
  const answer: { packets: { pts_time: string, flags: string }[], streams: Record<string, unknown>[], format: Record<string, unknown> } = JSON.parse(stdout)
  return answer
}

/** Names of boxes in the order in which they lie in the file. */
function boxesOf(bytes: Buffer): string[] {
  const names: string[] = []
  for (let at = 0; at + 8 <= bytes.length;) {
    const size = bytes.readUInt32BE(at)
    names.push(bytes.toString('latin1', at + 4, at + 8))
    at += size >= 8 ? size : bytes.length
  }
  return names
}

beforeAll(async () => {
  clinic = await makeClinic()
  therapist = await makeTherapist(clinic)
  patientId = (await makePatient(therapist)).id
  await makeConsent(therapist, patientId)
  sessionId = (await makeSession(therapist, patientId)).id
  folder = await mkdtemp(join(tmpdir(), 'standmark-review-'))
})

afterAll(async () => {
  await rm(folder, { recursive: true, force: true })
  closeStorage()
  await closeDatabase()
})

describe.each(NUMBERED_CLIPS.map(name => ({ name })))('the review copy of $name', ({ name }) => {
  let clip: Clip
  let made: Awaited<ReturnType<typeof makeNumberedClip>>
  beforeAll(async () => {
    ({ clip, made } = await makeReadyClip(therapist, sessionId, name))
  }, 180_000)

  it('keeps every presented frame and its time, upright and in the same size', async () => {
    expect(clip).toMatchObject({ status: 'ready', progress: 1, reason: null, width: made.width, height: made.height, frameCount: made.presented.length })
    const { timesUs } = expectBody(await therapist.client.get(`/api/clips/${clip.id}/frames`), 200, FrameTableSchema)
    expect(timesUs).toHaveLength(made.presented.length)
    // A tick of the copy is 11.1 microseconds.
    for (const [frame, { timeUs }] of made.presented.entries()) expect(Math.abs((timesUs[frame] ?? NaN) - timeUs), `frame ${frame}`).toBeLessThanOrEqual(6)
    const last = made.presented.at(-1)?.timeUs ?? 0
    expect(clip.frameRate).toBeCloseTo((made.presented.length - 1) * 1e6 / last, 2)
    expect(clip.durationMs).toBeGreaterThanOrEqual(Math.round(last / 1000))
  })

  it('cuts stills that show exactly the frame that was asked for', async () => {
    const count = made.presented.length
    // Both ends, both sides of the key frames, and the middle.
    const frames = [...new Set([0, 1, 14, 15, 16, Math.floor(count / 2), count - 2, count - 1])].filter(frame => frame >= 0 && frame < count)
    const seen: (number | null)[] = []
    for (const frame of frames) {
      const still = await pickStill(therapist, clip.id, frame)
      const { status, bytes } = await getBytes(therapist, `/api/stills/${still.id}/image`)
      expect(status).toBe(200)
      expect(await sharp(bytes).metadata()).toMatchObject({ format: 'png', width: made.width, height: made.height })
      seen.push(await readFrameNumberFromImage(bytes))
    }
    expect(seen).toEqual(frames.map(frame => made.presented[frame]?.number))
  })

  it('is H.264 with a key frame every 15 frames or fewer, without B-frames, sound, turn or metadata, and its head first', async () => {
    const { status, bytes } = await getBytes(therapist, `/api/clips/${clip.id}/media`)
    expect(status).toBe(200)
    const { streams, packets, format } = await probe(bytes, name)
    expect(streams).toHaveLength(1)
    expect(streams[0]).toMatchObject({ codec_type: 'video', codec_name: 'h264', pix_fmt: 'yuv420p', width: made.width, height: made.height, has_b_frames: 0, start_time: '0.000000' })
    expect(JSON.stringify(streams[0])).not.toContain('rotation')
    expect(Object.keys(format.tags ?? {}).filter(tag => !/brand|version/.test(tag))).toEqual([])
    const keys = packets.flatMap(({ flags }, at) => flags.startsWith('K') ? [at] : [])
    expect(keys[0]).toBe(0)
    for (const [at, key] of [...keys, packets.length].entries()) if (at > 0) expect(key - (keys[at - 1] ?? 0)).toBeLessThanOrEqual(15)
    const boxes = boxesOf(bytes)
    expect(boxes.indexOf('moov')).toBeLessThan(boxes.indexOf('mdat'))
  })

  it('has a poster, and a filmstrip whose every tile shows the frame it names', async () => {
    const poster = await getBytes(therapist, `/api/clips/${clip.id}/poster`)
    expect(poster.headers.get('content-type')).toBe('image/webp')
    expect((await sharp(poster.bytes).metadata()).format).toBe('webp')
    const plan = expectBody(await therapist.client.get(`/api/clips/${clip.id}/filmstrip.json`), 200, FilmstripSchema)
    const sprite = sharp((await getBytes(therapist, `/api/clips/${clip.id}/filmstrip`)).bytes)
    expect(await sprite.metadata()).toMatchObject({ format: 'webp', width: plan.columns * plan.tileWidth, height: plan.rows * plan.tileHeight })
    expect(plan.frames).toEqual([...new Set(plan.frames)].sort((a, b) => a - b))
    const numbers = await Promise.all(plan.frames.map(async (_frame, tile) => {
      const place = { left: tile % plan.columns * plan.tileWidth, top: Math.floor(tile / plan.columns) * plan.tileHeight, width: plan.tileWidth, height: plan.tileHeight }
      const { data, info } = await sprite.clone().extract(place).resize(made.width, made.height, { kernel: 'nearest' }).removeAlpha().raw().toBuffer({ resolveWithObject: true })
      return readFrameNumber({ data, width: info.width, height: info.height, channels: info.channels })
    }))
    // A number may blur in a tile of 160 pixels; one that can be read is the right one.
    for (const [tile, number] of numbers.entries()) if (number !== null) expect(number).toBe(made.presented[plan.frames[tile] ?? -1]?.number)
  })
})

describe('a clip of several parts and a larger picture', () => {
  it('is brought to 1920 pixels on its long side, and pixels that are not square are made square', async () => {
    const path = join(folder, 'wide-pixels.mp4')
    await run('ffmpeg', ['-v', 'error', '-f', 'lavfi', '-i', 'testsrc2=s=1440x1080:r=10:d=1', '-vf', 'setsar=4/3', '-c:v', 'libx264', '-preset', 'ultrafast', '-pix_fmt', 'yuv420p', path])
    const wide = await waitForClip(therapist, (await uploadClip(therapist, sessionId, await fileOf({ path, fileName: 'wide.mp4', contentType: 'video/mp4' }))).id)
    expect(wide).toMatchObject({ status: 'ready', width: 1920, height: 1080 })
    const large = join(folder, 'large.mp4')
    await run('ffmpeg', ['-v', 'error', '-f', 'lavfi', '-i', 'testsrc2=s=2160x3840:r=10:d=0.6', '-c:v', 'libx264', '-preset', 'ultrafast', '-pix_fmt', 'yuv420p', large])
    const small = await waitForClip(therapist, (await uploadClip(therapist, sessionId, await fileOf({ path: large, fileName: 'large.mp4', contentType: 'video/mp4' }))).id)
    expect(small).toMatchObject({ status: 'ready', width: 1080, height: 1920 })
  })
})

describe('bad input', () => {
  let canary: Server
  let canaryUrl = ''
  let asked = 0
  const accepted: { name: string, clipId: string, absent: string[] }[] = []

  beforeAll(async () => {
    canary = createServer((_request, response) => {
      asked += 1
      response.end('found')
    })
    await new Promise<void>(resolve => canary.listen(0, '127.0.0.1', resolve))
    const address = canary.address()
    canaryUrl = `http://127.0.0.1:${address && typeof address === 'object' ? address.port : 0}/canary`
  })
  afterAll(() => new Promise(resolve => canary.close(resolve)))

  it.each(BAD_INPUTS.filter(name => name !== 'empty').map(name => [name]))('%s gets its answer, and nothing of a refused one stays', async (name) => {
    const made = await makeBadInput(name, { canaryUrl })
    const clip = await waitForClip(therapist, (await uploadClip(therapist, sessionId, await fileOf(made))).id)
    const outcome = made.outcome === 'either' ? ['ready', 'refused'] : [made.outcome === 'accepted' ? 'ready' : 'refused']
    expect(outcome, `${clip.status} ${clip.reason}`).toContain(clip.status)
    if (clip.status === 'ready') {
      accepted.push({ name, clipId: clip.id, absent: made.absent })
      return
    }
    expect(made.reasons).toContain(clip.reason)
    expect(clip).toMatchObject({ width: null, height: null, frameCount: null, frameRate: null, durationMs: null })
    const [row] = await query<{ original_key: string }>(clinic.id, 'select original_key from clip where id = $1', [clip.id])
    await expect.poll(() => openStorage().head(row?.original_key ?? ''), { timeout: 30_000, interval: 300 }).toBeNull()
    expectError(await therapist.client.get(`/api/clips/${clip.id}/media`), 409, 'clip-not-ready')
    expectError(await therapist.client.post(`/api/clips/${clip.id}/stills`, { frame: 0 }), 409, 'clip-not-ready')
    const trail = (await auditOf(clinic.id, { action: 'clip.refuse' })).filter(line => line.target_id === clip.id)
    expect(trail).toMatchObject([{ patient_id: patientId, after: { status: 'refused', reason: clip.reason } }])
  }, 180_000)

  it('an empty file is refused before anything is kept', async () => {
    expectError(await therapist.client.post(`/api/sessions/${sessionId}/clips`, clipBody({ size: 0 })), 400, 'validation-failed')
  })

  it('what came along in an accepted clip is in nothing that is served', async () => {
    expect(accepted.length).toBeGreaterThan(0)
    for (const { name, clipId, absent } of accepted) {
      for (const end of ['media', 'poster', 'filmstrip']) {
        const { status, bytes } = await getBytes(therapist, `/api/clips/${clipId}/${end}`)
        expect(status, name).toBe(200)
        for (const text of absent) expect(bytes.includes(text), `${text} in ${end} of ${name}`).toBe(false)
      }
    }
  })

  it('nothing ever asked for the address that manifests and play lists name', () => {
    expect(asked).toBe(0)
  })

  it('leaves no folder of a job behind', async () => {
    const workDir = process.env.STANDMARK_TEST_DATA
    if (!workDir) return
    await expect.poll(async () => (await readdir(join(workDir, 'work'))).filter(name => name.startsWith('job-')), { timeout: 20_000 }).toEqual([])
  })
})

describe('consent that is withdrawn while a clip waits', () => {
  it('refuses the clip and deletes it', async () => {
    const patient = await makePatient(therapist)
    const consent = await makeConsent(therapist, patient.id)
    const session = await makeSession(therapist, patient.id)
    const made = await fileOf(await makeNumberedClip('key-frames-250'))
    // Several at once, so that the last ones still wait when the consent goes.
    const clips = await Promise.all([1, 2, 3].map(() => uploadClip(therapist, session.id, made)))
    expect((await therapist.client.delete(`/api/consents/${consent.id}`)).status).toBe(200)
    const ended = await Promise.all(clips.map(clip => waitForClip(therapist, clip.id)))
    expect(ended.filter(clip => clip.status === 'refused' && clip.reason === 'consent-withdrawn').length).toBeGreaterThanOrEqual(2)
  }, 180_000)
})

describe('a run that was overtaken', () => {
  it('changes nothing: the row\'s attempt fences it', async () => {
    const made = await fileOf(await makeNumberedClip('key-frames-250'))
    const { id } = await uploadClip(therapist, sessionId, made)
    // As if another process had taken it over for a minute: the run that works on it now must not make it ready.
    await expect.poll(async () => (await query<{ attempt: number }>(clinic.id, 'select attempt from clip where id = $1', [id]))[0]?.attempt, { timeout: 60_000, interval: 50 }).toBe(1)
    await query(clinic.id, 'update clip set attempt = 7, lease_until = now() + interval \'8 seconds\' where id = $1', [id])
    await new Promise(resolve => setTimeout(resolve, 6_000))
    expect(await readClip(therapist, id)).toMatchObject({ status: 'processing' })
    for (const end of ['review.mp4', 'poster.webp', 'filmstrip.webp']) expect(await openStorage().head(`m/${id}/1/${end}`)).toBeNull()
  }, 120_000)
})
