import { describe, expect, it } from 'vitest'
import { MAX_UPLOAD_BYTES } from '#shared/schemas/clip'
import { contentTypeOf, refuseEarly } from '~/upload/file-check'
import { fingerprintOf } from '~/upload/fingerprint'
import { usableNotes } from '~/upload/kept-upload'
import { matchBout } from '~/upload/match-bout'
import { missingParts, partLength, partRange } from '~/upload/part-plan'
import { pauseAfter } from '~/upload/patience'
import { createSlotPool } from '~/upload/slot-pool'
import { addSample, rateOf, remainingOf } from '~/upload/transfer-rate'
import type { RateSample } from '~/upload/transfer-rate'
import { advance, newStatus } from '~/upload/upload-state'

describe('the plan of parts', () => {
  const plan = { partSize: 100, partCount: 3 }

  it('covers the file without gap or overlap', () => {
    expect([1, 2, 3].map(part => partRange(plan, 250, part))).toEqual([{ start: 0, end: 100 }, { start: 100, end: 200 }, { start: 200, end: 250 }])
  })

  it('knows no part outside of itself', () => {
    expect([0, 4, -1].map(part => partLength(plan, 250, part))).toEqual([0, 0, 0])
  })

  it('counts a part of another length as missing', () => {
    const stored = [{ partNumber: 1, size: 100, etag: 'a' }, { partNumber: 2, size: 99, etag: 'b' }, { partNumber: 9, size: 100, etag: 'c' }]
    expect(missingParts(plan, 250, stored)).toEqual([2, 3])
  })
})

describe('the pause before another try', () => {
  it('doubles up to half a minute, half of it certain', () => {
    expect([1, 2, 3, 4, 5, 6, 7].map(failures => pauseAfter(failures, 0))).toEqual([500, 1000, 2000, 4000, 8000, 15_000, 15_000])
    expect([1, 6, 20].map(failures => pauseAfter(failures, 1))).toEqual([1000, 30_000, 30_000])
  })
})

describe('the places for parts', () => {
  it('go to the upload that began first, whoever asked first', async () => {
    const pool = createSlotPool(1)
    const { signal } = new AbortController()
    const release = await pool.take(1, signal)
    const served: number[] = []
    const jobs = [3, 2, 1].map(order => pool.take(order, signal).then((free) => { served.push(order); free() }))
    release()
    await Promise.all(jobs)
    expect(served).toEqual([1, 2, 3])
  })

  it('are not lost by one who leaves the queue, nor gained by giving one back twice', async () => {
    const pool = createSlotPool(1)
    const control = new AbortController()
    const release = await pool.take(1, control.signal)
    const left = pool.take(2, control.signal)
    control.abort('gone')
    await expect(left).rejects.toBe('gone')
    release()
    release()
    const { signal } = new AbortController()
    await pool.take(1, signal)
    let isServed = false
    void pool.take(1, signal).then(() => { isServed = true })
    await new Promise(resolve => setImmediate(resolve))
    expect(isServed).toBe(false)
  })
})

describe('rate and remaining time', () => {
  const follow = (samples: [at: number, bytes: number][]) => samples.reduce<RateSample[]>((all, [at, bytes]) => addSample(all, { at, bytes }), [])

  it('say nothing in the first seconds', () => {
    expect(rateOf(follow([[0, 0], [1000, 5000]]))).toBeNull()
    expect(rateOf([])).toBeNull()
  })

  it('follow the last twelve seconds, so that a slower network shows', () => {
    expect(rateOf(follow([[0, 0], [4000, 4000]]))).toBe(1000)
    expect(rateOf(follow([[0, 0], [4000, 400_000], [5000, 400_100], [17_000, 401_300]]))).toBe(100)
  })

  it('do not turn negative when a part begins again', () => {
    expect(rateOf(follow([[0, 5000], [4000, 1000]]))).toBeNull()
  })

  it('come in steps that one can know', () => {
    expect(remainingOf(9, 1)).toEqual({ unit: 'moments' })
    expect(remainingOf(33, 1)).toEqual({ unit: 'seconds', count: 40 })
    expect(remainingOf(51, 1)).toEqual({ unit: 'minutes', count: 1 })
    expect(remainingOf(170, 1)).toEqual({ unit: 'minutes', count: 3 })
    expect(remainingOf(4310, 1)).toEqual({ unit: 'hours', count: 1, minutes: 10 })
    expect(remainingOf(3599, 1)).toEqual({ unit: 'hours', count: 1, minutes: 0 })
  })
})

describe('the fingerprint of a file', () => {
  const bytes = (fill: (index: number) => number) => new Uint8Array(300_000).map((_, index) => fill(index))
  const file = (name: string, content: Uint8Array<ArrayBuffer>, lastModified = 1000) => new File([content], name, { lastModified })
  const base = bytes(index => index % 7)

  it('is the same for the same file picked twice, and tells nothing of its name', async () => {
    const [one, two] = [await fingerprintOf(file('stand.mp4', base)), await fingerprintOf(file('stand.mp4', base))]
    expect(one).toBe(two)
    expect(one).toMatch(/^[0-9a-f]{64}$/)
  })

  it.each([
    ['name', file('other.mp4', base)],
    ['time', file('stand.mp4', base, 2000)],
    ['size', file('stand.mp4', base.slice(0, 299_999))],
    ['first bytes', file('stand.mp4', bytes(index => index === 0 ? 9 : index % 7))],
    ['last bytes', file('stand.mp4', bytes(index => index === 299_999 ? 9 : index % 7))],
  ])('differs with another %s', async (_what, other) => {
    expect(await fingerprintOf(other)).not.toBe(await fingerprintOf(file('stand.mp4', base)))
  })

  it('does not mind how a system writes an accent', async () => {
    expect(await fingerprintOf(file('Orlá.mp4', base))).toBe(await fingerprintOf(file('Orla\u0301.mp4', base)))
  })

  it('takes files shorter than the piece it looks at', async () => {
    expect(await fingerprintOf(file('a.mp4', base.slice(0, 3)))).toMatch(/^[0-9a-f]{64}$/)
  })
})

describe('the early look at a file', () => {
  const file = (name: string, type: string, size = 5) => Object.assign(new File(['12345'.slice(0, Math.min(size, 5))], name, { type }), size > 5 ? { size } : {})
  const sized = (size: number) => {
    const big = new File(['1'], 'a.mp4', { type: 'video/mp4' })
    Object.defineProperty(big, 'size', { value: size })
    return big
  }

  it('takes videos by the kind the system says, or by the ending when it says none', () => {
    expect(contentTypeOf(file('IMG_0001.MOV', ''))).toBe('video/quicktime')
    expect(contentTypeOf(file('a.mkv', 'application/octet-stream'))).toBe('video/x-matroska')
    expect(contentTypeOf(file('noending', 'video/webm;codecs=vp9'))).toBe('video/webm')
  })

  it('refuses what is plainly no video, empty, or too large', () => {
    expect(refuseEarly(file('notes.txt', 'text/plain'))).toBe('not-a-video')
    expect(refuseEarly(file('notes.mp4', 'text/plain'))).toBe('not-a-video')
    expect(refuseEarly(file('a.mp4', 'video/mp4', 0))).toBe('empty-file')
    expect(refuseEarly(sized(MAX_UPLOAD_BYTES + 1))).toBe('too-large')
    expect(refuseEarly(sized(MAX_UPLOAD_BYTES))).toBeNull()
  })
})

describe('the bout a clip shows', () => {
  const bouts = [
    { id: 'first', startedAt: '2026-11-27T09:20:00.000Z', endedAt: '2026-11-27T09:21:00.000Z' },
    { id: 'second', startedAt: '2026-11-27T09:24:00.000Z', endedAt: '2026-11-27T09:26:00.000Z' },
    { id: 'running', startedAt: '2026-11-27T09:40:00.000Z', endedAt: null },
  ]
  const at = (time: string) => matchBout(bouts, Date.parse(`2026-11-27T${time}Z`))

  it('is the one that was going on or had just ended when the file was written', () => {
    expect(at('09:25:00.000')).toBe('second')
    expect(at('09:22:30.000')).toBe('first')
    expect(at('09:45:00.000')).toBe('running')
  })

  it('is none when the time fits none', () => {
    expect(at('09:10:00.000')).toBeNull()
    expect(at('09:35:00.000')).toBeNull()
  })
})

describe('notes of unfinished uploads', () => {
  const note = { clipId: '01890000-0000-7000-8000-000000000001', userId: '01890000-0000-7000-8000-00000000000a', fingerprint: 'a'.repeat(64), begunAt: 1000 }

  it('count only for the person who made them, while they are young and sound', () => {
    const other = { ...note, userId: '01890000-0000-7000-8000-00000000000b' }
    const old = { ...note, begunAt: -8 * 86_400_000 }
    expect(usableNotes([other, old, { clipId: 'x' }, null, note], note.userId, 2000)).toEqual([note])
  })
})

describe('the status', () => {
  it('does not call a part that begins again movement', () => {
    const retrying = advance({ ...newStatus(100), sentBytes: 50, phase: 'sending' }, { type: 'paused', why: 'retrying' })
    expect(advance(retrying, { type: 'moved', sentBytes: 30 })).toMatchObject({ pause: 'retrying', sentBytes: 30 })
    expect(advance(retrying, { type: 'moved', sentBytes: 55 })).toMatchObject({ phase: 'sending', pause: null })
  })

  it('stays without a network until it is back, whatever was still on its way', () => {
    const offline = advance({ ...newStatus(100), phase: 'sending' }, { type: 'paused', why: 'offline' })
    const moved = advance(offline, { type: 'moved', sentBytes: 55 })
    expect(moved).toMatchObject({ phase: 'sending', pause: 'offline', sentBytes: 55 })
    expect(advance(moved, { type: 'resumed' })).toMatchObject({ pause: null })
  })
})
