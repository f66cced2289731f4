import { beforeAll, describe, expect, it } from 'vitest'
import { FrameTableSchema, type Clip } from '#shared/schemas/clip'
import { expectBody } from '../fixtures/api/answers'
import { fileOf, getBytes, pickStill, uploadClip, waitForClip } from '../fixtures/api/clips'
import { readFrameNumberFromImage } from '../fixtures/numbered/frame-number.mjs'
import { makeNumberedClip, type NumberedClip } from '../fixtures/numbered/numbered-clips.mjs'
import { benchOf } from './bench-page'
import { signInThroughForm, useChromium, type Visit } from './browser'
import { credentials, makeWard, type Ward } from './people'

/**
 * Each clip carries its frame numbers in its pixels, so that nothing has to be believed: what the server cuts and what the
 * bench paints is read back from the picture. A frame off by one is a wrong frame.
 */
const KINDS = [
  'constant-25', 'ntsc-2997', 'variable-rate', 'turned-phone', 'fps-60', 'webm-vp9', 'edit-list', 'b-frames', 'late-start', 'negative-start', 'hevc',
] as const
const STILLS = 6
const JUMPS = 20
const STEPS = 20
/** A time stamp of the review copy counts in 90 000ths of a second. */
const TICK_US = 1_000_000 / 90_000

const chrome = useChromium()
const uploaded = new Map<string, { made: NumberedClip, clipId: string }>()
let ward: Ward
let therapistsVisit: Visit

beforeAll(async () => {
  ward = await makeWard()
  // All at once: while one kind is looked at, the next ones are being prepared.
  for (const kind of KINDS) {
    const made = await makeNumberedClip(kind)
    uploaded.set(kind, { made, clipId: (await uploadClip(ward.therapist, ward.sessionId, await fileOf(made))).id })
  }
  // A small window: painting is what takes the time here.
  therapistsVisit = await chrome.visit({ viewport: { width: 1120, height: 660 } })
  await signInThroughForm(therapistsVisit.page, credentials(ward.therapist))
}, 240_000)

async function readyClip(kind: string): Promise<{ clip: Clip, made: NumberedClip }> {
  const known = uploaded.get(kind)
  if (!known) throw new Error(`${kind} was not uploaded`)
  const clip = await waitForClip(ward.therapist, known.clipId)
  expect(clip.status, clip.reason ?? '').toBe('ready')
  return { clip, made: known.made }
}

/** Whole numbers below a limit, the same in every run (a linear congruential generator, high bits). */
function pick(seed: number, count: number, limit: number): number[] {
  let state = seed >>> 0
  return Array.from({ length: count }, () => {
    state = (Math.imul(state, 1_664_525) + 1_013_904_223) >>> 0
    return Math.floor(state / 2 ** 32 * limit)
  })
}

describe.each(KINDS.map((kind, seed) => ({ kind, seed })))('a clip of the kind $kind', ({ kind, seed }) => {
  it('keeps every presented frame with its time', async () => {
    const { clip, made } = await readyClip(kind)
    const { timesUs } = expectBody(await ward.therapist.client.get(`/api/clips/${clip.id}/frames`), 200, FrameTableSchema)
    expect({ frames: clip.frameCount, width: clip.width, height: clip.height }).toEqual({ frames: made.presented.length, width: made.width, height: made.height })
    expect(timesUs).toHaveLength(made.presented.length)
    timesUs.forEach((time, frame) => expect(Math.abs(time - (made.presented[frame]?.timeUs ?? Number.NaN)), `frame ${frame}`).toBeLessThanOrEqual(TICK_US))
  })

  it('gives the very frame as a still', async () => {
    const { clip, made } = await readyClip(kind)
    const last = made.presented.length - 1
    const frames = [...new Set([0, last, ...pick(seed + 100, STILLS - 2, last)])]
    const read = await Promise.all(frames.map(async (frame) => {
      const still = await pickStill(ward.therapist, clip.id, frame)
      return readFrameNumberFromImage((await getBytes(ward.therapist, `/api/stills/${still.id}/image`)).bytes)
    }))
    expect(read).toEqual(frames.map(frame => made.presented[frame]?.number))
  })

  it('shows the very frame on the bench, after jumps and after steps', async () => {
    const { clip, made } = await readyClip(kind)
    const { page } = therapistsVisit
    const bench = benchOf(page, made)
    const times = made.presented.map(frame => frame.timeUs)
    const last = times.length - 1
    await bench.open(clip.id)
    const wanted: number[] = []
    const seen: { said: number, burned: number | null }[] = []
    async function look(frame: number): Promise<void> {
      wanted.push(frame)
      seen.push(await bench.readAt(frame))
    }

    for (const frame of [last, 0, ...pick(seed + 200, JUMPS - 2, times.length)]) {
      await bench.jump(frame, times)
      await look(frame)
    }
    let frame = wanted.at(-1) ?? 0
    for (const choice of pick(seed + 300, STEPS, 4)) {
      // Runs of one direction with turns between them, single steps and tens.
      const by = frame <= 1 ? 1 : frame >= last - 1 ? -1 : choice === 3 ? -1 : choice === 2 ? 10 : 1
      frame = Math.min(last, frame + by)
      await page.keyboard.press(by === 10 ? 'PageDown' : by === 1 ? 'ArrowRight' : 'ArrowLeft')
      await look(frame)
    }
    expect(seen).toEqual(wanted.map(asked => ({ said: asked, burned: made.presented[asked]?.number })))
    // Decoded here, not fetched as stills of the server.
    expect(await page.getByText('Frames come from the server').count()).toBe(0)
  })
})
