import { describe, expect, it } from 'vitest'
import type { ClipInput } from '#shared/schemas/clip'
import { CANCEL, LEAVE, runUpload } from '~/upload/run-upload'
import { createSlotPool } from '~/upload/slot-pool'
import { UploadProblem } from '~/upload/upload-network'
import { advance, newStatus } from '~/upload/upload-state'
import type { UploadEvent, UploadPhase, UploadStatus } from '~/upload/upload-state'
import { aClip, CLIP_ID, fakeSurroundings, fakeWire, settle } from './fake-network'

const INPUT: ClipInput = { fileName: 'stand.mp4', size: 1000, contentType: 'video/mp4', view: 'sagittal', side: 'right' }
const away = () => new UploadProblem(0, 'network')
const busy = () => new UploadProblem(503, 'storage-unavailable')

function setUp({ size = 1000, partSize = 100 } = {}) {
  const ends = fakeWire(size, partSize)
  const around = fakeSurroundings()
  const control = new AbortController()
  const slots = createSlotPool(4)
  const events: UploadEvent[] = []
  const phases: UploadPhase[] = []
  const pauses: UploadStatus['pause'][] = []
  let status = newStatus(size)
  const report = (event: UploadEvent) => {
    events.push(event)
    status = advance(status, event)
    if (phases.at(-1) !== status.phase) phases.push(status.phase)
    if (pauses.at(-1) !== status.pause) pauses.push(status.pause)
  }
  const start = (clipId: string | null = null) => runUpload(
    { file: ends.file, input: INPUT, idempotencyKey: 'key', clipId, order: 1 },
    { network: ends.network, surroundings: around.surroundings, slots, report }, control.signal)
  return { ...ends, ...around, control, slots, events, phases, pauses, start, status: () => status }
}

describe('an upload that nothing disturbs', () => {
  it('goes from planning through sending, joining and preparing to ready, in that order', async () => {
    const it = setUp()
    await it.start()
    expect(it.phases).toEqual(['starting', 'queued', 'sending', 'completing', 'processing', 'ready'])
  })

  it('puts every byte in its place and sends no part twice', async () => {
    const it = setUp({ size: 1037 })
    await it.start()
    expect(Buffer.compare(it.storedBytes(), Buffer.from(it.bytes))).toBe(0)
    expect([...it.puts].sort((a, b) => a - b)).toEqual([1, 2, 3, 4, 5, 6, 7, 8, 9, 10, 11])
  })

  it('begins with the first parts and has four on their way at most', async () => {
    const it = setUp()
    await it.start()
    expect(it.puts.slice(0, 4).sort()).toEqual([1, 2, 3, 4])
    expect(it.wire.mostAtOnce).toBe(4)
  })

  it('signs no more than eight addresses ahead', async () => {
    const it = setUp({ size: 3000 })
    await it.start()
    expect(Math.max(...it.signed.map(batch => batch.length))).toBe(8)
    expect(it.signed.flat().sort((a, b) => a - b)).toEqual(Array.from({ length: 30 }, (_, index) => index + 1))
  })

  it('never reports more bytes than the file has, and all of them at the end', async () => {
    const it = setUp()
    await it.start()
    const moved = it.events.flatMap(event => event.type === 'moved' ? [event.sentBytes] : [])
    expect(Math.max(...moved)).toBe(1000)
    expect(it.status().sentBytes).toBe(1000)
  })

  it('names the reason of a refusal', async () => {
    const it = setUp()
    it.wire.looks.splice(0, 2, aClip({ status: 'refused', reason: 'not-a-video' }))
    await it.start()
    expect(it.status()).toMatchObject({ phase: 'refused', reason: 'not-a-video' })
  })

  it('looks at the clip ever more seldom while it is prepared, at least every ten seconds', async () => {
    const it = setUp({ size: 100 })
    it.wire.looks.unshift(...Array.from({ length: 9 }, () => aClip({ status: 'processing', progress: 0.1 })))
    await it.start()
    expect(it.waits.slice(0, 3)).toEqual([1000, 1500, 2250])
    expect(Math.max(...it.waits)).toBe(10_000)
  })

  it('asks for the tags when the storage does not show them', async () => {
    const it = setUp()
    const put = it.network.putPart
    it.network.putPart = async (url, bytes, options) => { await put(url, bytes, options); return null }
    await it.start()
    expect(it.status().phase).toBe('ready')
    expect(it.calls).toContain('readUpload')
  })
})

describe('failures that pass', () => {
  it('sends a part again after a pause that grows and is partly chance', async () => {
    const it = setUp({ size: 100 })
    it.failures['putPart 1'] = [busy(), busy(), busy()]
    await it.start()
    expect(it.status().phase).toBe('ready')
    expect(it.puts).toEqual([1, 1, 1, 1])
    // Half of 1 s, 2 s, 4 s for sure and half of the other half by the chance of 0.5.
    expect(it.waits.slice(0, 3)).toEqual([750, 1500, 3000])
  })

  it('does not send a part again that arrived although its answer was lost', async () => {
    const it = setUp()
    it.wire.keepsDespiteFailure = true
    it.failures['putPart 3'] = [away()]
    await it.start()
    expect(it.puts.filter(part => part === 3)).toHaveLength(1)
    expect(it.status().phase).toBe('ready')
  })

  it('asks for a new address at once when the storage refuses the old one', async () => {
    const it = setUp({ size: 300 })
    it.failures['putPart 2'] = [new UploadProblem(403, 'address-refused')]
    await it.start()
    expect(it.signed.filter(batch => batch.includes(2))).toHaveLength(2)
    // All waiting there was: for the clip to be prepared.
    expect(it.waits.every(ms => ms >= 1000)).toBe(true)
    expect(it.status().phase).toBe('ready')
  })

  it('does not use an address that has grown old while it waited', async () => {
    const it = setUp({ size: 800 })
    it.wire.onPut = async () => it.pass(300_000)
    await it.start()
    expect(it.signed.length).toBeGreaterThan(1)
    expect(it.status().phase).toBe('ready')
  })

  it('says that it tries again, and takes the words back once bytes move', async () => {
    const it = setUp({ size: 100 })
    it.failures['putPart 1'] = [busy(), busy()]
    await it.start()
    expect(it.pauses).toEqual([null, 'retrying', null])
  })

  it('waits as long as the server asks', async () => {
    const it = setUp()
    it.failures.create = [new UploadProblem(429, 'too-many-attempts', 20_000)]
    await it.start()
    expect(it.waits[0]).toBe(20_000)
  })

  it('joins once more when the server misses a part, and sends only that one', async () => {
    const it = setUp()
    const { complete } = it.network
    let isFirst = true
    it.network.complete = async (clipId, input) => {
      if (isFirst) it.parts.delete(7)
      isFirst = false
      return complete(clipId, input)
    }
    await it.start()
    expect(it.status().phase).toBe('ready')
    expect(it.puts.filter(part => part === 7)).toHaveLength(2)
    expect(it.puts).toHaveLength(11)
  })

  it('takes an upload for complete when an earlier call completed it and only the answer was lost', async () => {
    const it = setUp()
    const { complete } = it.network
    let isFirst = true
    it.network.complete = async (clipId, input) => {
      const clip = await complete(clipId, input)
      if (!isFirst) return clip
      isFirst = false
      throw away()
    }
    await it.start()
    expect(it.status().phase).toBe('ready')
  })

  it('stops after many failures in a row, keeps what is there, and goes on from it', async () => {
    const it = setUp({ size: 400 })
    it.failures['putPart 2'] = Array.from({ length: 9 }, busy)
    await it.start()
    expect(it.status()).toMatchObject({ phase: 'stopped', problem: { code: 'storage-unavailable' } })
    expect(it.calls).not.toContain('remove')
    const before = it.puts.length
    await it.start(CLIP_ID)
    expect(it.status().phase).toBe('ready')
    expect(it.puts.slice(before)).not.toContain(1)
  })
})

describe('failures that do not pass', () => {
  it('stops at once without consent and sends nothing', async () => {
    const it = setUp()
    it.failures.create = [new UploadProblem(409, 'no-recording-consent')]
    await it.start()
    expect(it.status()).toMatchObject({ phase: 'stopped', problem: { code: 'no-recording-consent' } })
    expect(it.puts).toEqual([])
    expect(it.waits).toEqual([])
  })

  it('tells a file that was changed or moved from a network that is away', async () => {
    const it = setUp({ size: 100 })
    it.failures['putPart 1'] = [away()]
    const unreadable = { slice: () => unreadable, arrayBuffer: () => Promise.reject(new Error('NotReadableError')), size: 100 }
    it.file.slice = () => Object.assign(new Blob([new Uint8Array(100)]), { slice: () => Object.assign(new Blob(), unreadable) })
    await it.start()
    expect(it.status()).toMatchObject({ phase: 'stopped', problem: { code: 'file-changed' } })
  })

  it('stops when the storage has dropped the upload, instead of waiting for a clip that never comes', async () => {
    const it = setUp({ size: 100 })
    it.failures['putPart 1'] = [new UploadProblem(404, 'upload-not-open')]
    await it.start()
    expect(it.status()).toMatchObject({ phase: 'stopped', problem: { code: 'upload-not-open' } })
  })

  it('ends the other parts when one cannot be sent', async () => {
    const it = setUp({ size: 4000 })
    it.failures['putPart 2'] = [new UploadProblem(400, 'storage-refused')]
    await it.start()
    expect(it.status()).toMatchObject({ phase: 'stopped', problem: { code: 'storage-refused' } })
    expect(it.puts.length).toBeLessThan(12)
  })
})

describe('going on with an upload', () => {
  it('sends no part that the storage holds whole, and again the one that was cut off', async () => {
    const it = setUp()
    for (const part of [1, 2, 3, 5]) it.parts.set(part, it.bytes.slice((part - 1) * 100, part * 100))
    it.parts.set(6, it.bytes.slice(500, 540))
    await it.start(CLIP_ID)
    expect(it.calls).not.toContain('create')
    expect([...it.puts].sort((a, b) => a - b)).toEqual([4, 6, 7, 8, 9, 10])
    expect(Buffer.compare(it.storedBytes(), Buffer.from(it.bytes))).toBe(0)
    expect(it.status().phase).toBe('ready')
  })

  it('counts what is there from the start', async () => {
    const it = setUp()
    for (const part of [1, 2]) it.parts.set(part, it.bytes.slice((part - 1) * 100, part * 100))
    await it.start(CLIP_ID)
    expect(it.events.find(event => event.type === 'planned')).toMatchObject({ storedBytes: 200 })
    const moved = it.events.flatMap(event => event.type === 'moved' ? [event.sentBytes] : [])
    expect(Math.min(...moved)).toBeGreaterThanOrEqual(200)
  })

  it('only joins when all parts are there', async () => {
    const it = setUp({ size: 200 })
    for (const part of [1, 2]) it.parts.set(part, it.bytes.slice((part - 1) * 100, part * 100))
    await it.start(CLIP_ID)
    expect(it.puts).toEqual([])
    expect(it.status().phase).toBe('ready')
  })

  it('only follows when it was completed before', async () => {
    const it = setUp()
    it.wire.clip = aClip({ status: 'processing' })
    await it.start(CLIP_ID)
    expect(it.calls).not.toContain('complete')
    expect(it.puts).toEqual([])
    expect(it.status().phase).toBe('ready')
  })
})

describe('without a network', () => {
  it('pauses, loses no part, counts nothing as a failure, and goes on when the network is back', async () => {
    const it = setUp()
    it.wire.onPut = async (partNumber) => {
      if (partNumber !== 5 || it.puts.filter(part => part === 5).length > 1) return
      it.goOffline()
      throw away()
    }
    const done = it.start()
    await settle()
    expect(it.status()).toMatchObject({ phase: 'sending', pause: 'offline' })
    const sent = it.puts.length
    await settle()
    expect(it.puts).toHaveLength(sent)
    expect(it.waits).toEqual([])
    it.comeBack()
    await done
    expect(it.status().phase).toBe('ready')
    for (const part of [1, 2, 3, 4]) expect(it.puts.filter(one => one === part)).toHaveLength(1)
  })

  it('waits for the person to sign in again and then goes on', async () => {
    const it = setUp()
    it.failures.signParts = [null, new UploadProblem(401, 'not-signed-in')]
    it.signOut()
    const done = it.start()
    await settle()
    expect(it.status()).toMatchObject({ phase: 'sending', pause: 'signed-out' })
    it.signIn()
    await done
    expect(it.status().phase).toBe('ready')
    expect(it.puts).toHaveLength(10)
  })
})

describe('cancelling', () => {
  it('stops the parts that are on their way and has the clip removed', async () => {
    const it = setUp()
    it.wire.onPut = async (partNumber, { signal }) => {
      if (partNumber === 6) it.control.abort(CANCEL)
      signal.throwIfAborted()
    }
    await it.start()
    expect(it.status().phase).toBe('cancelled')
    expect(it.calls.at(-1)).toBe('remove')
    expect(it.calls).not.toContain('complete')
    expect(Math.max(...it.puts)).toBeLessThan(10)
  })

  it('removes a clip whose making was still under way', async () => {
    const it = setUp()
    const { create } = it.network
    it.network.create = async (input, key) => {
      it.control.abort(CANCEL)
      return create(input, key)
    }
    await it.start()
    expect(it.calls).toEqual(['create', 'remove'])
    expect(it.puts).toEqual([])
  })

  it('works while there is no network, once it is back', async () => {
    const it = setUp()
    it.wire.onPut = async () => { it.goOffline(); throw away() }
    const done = it.start()
    await settle()
    it.control.abort(CANCEL)
    await settle()
    expect(it.calls).not.toContain('remove')
    it.comeBack()
    await done
    expect(it.status().phase).toBe('cancelled')
  })

  it('leaves the upload for later when the person signs out', async () => {
    const it = setUp()
    it.wire.onPut = async () => { it.control.abort(LEAVE) }
    await it.start()
    expect(it.calls).not.toContain('remove')
    expect(it.phases).not.toContain('stopped')
  })

  it('is not undone by an answer that comes late', () => {
    const ended = advance(newStatus(10), { type: 'cancelled' })
    expect(advance(ended, { type: 'followed', clip: aClip({ status: 'ready' }) })).toBe(ended)
  })
})
