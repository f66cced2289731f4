import { createHash, randomBytes, randomUUID } from 'node:crypto'
import { afterAll, describe, expect, it } from 'vitest'
import { createStorage } from '#server/adapters/storage'
import { StorageError } from '#server/adapters/storage-error'

// The adapter against a real object store: Swift's S3 interface, which checks signatures, lengths and entity tags.
const endpoint = process.env.STANDMARK_TEST_STORAGE_ENDPOINT ?? ''
const settings = {
  endpoint,
  publicEndpoint: endpoint,
  region: 'us-east-1',
  bucket: process.env.STANDMARK_TEST_STORAGE_BUCKET ?? '',
  key: process.env.STANDMARK_TEST_STORAGE_KEY ?? '',
  secret: process.env.STANDMARK_TEST_STORAGE_SECRET ?? '',
}
const storage = createStorage(settings)
const PART = 5 * 1024 * 1024
const parts = [randomBytes(PART), randomBytes(PART), randomBytes(1234)]
const keys: string[] = []

function newKey(): string {
  const key = `test/${randomUUID()}`
  keys.push(key)
  return key
}

function md5(bytes: Buffer): string {
  return createHash('md5').update(bytes).digest('hex')
}

async function begin() {
  const key = newKey()
  return { key, uploadId: await storage.createUpload(key, 'video/mp4') }
}

async function send(url: string, body: Buffer): Promise<Response> {
  return fetch(url, { method: 'PUT', body: new Uint8Array(body) })
}

async function kindOf(work: Promise<unknown>): Promise<string> {
  const failure: unknown = await work.then(() => null, (error: unknown) => error)
  return failure instanceof StorageError ? failure.kind : `not a StorageError: ${String(failure)}`
}

afterAll(async () => {
  for (const key of keys) await storage.remove(key)
  storage.close()
})

describe('multi-part upload', () => {
  it('joins parts that were sent to signed addresses, in any order, to the same bytes', async () => {
    const place = await begin()
    for (const index of [2, 0, 1]) {
      const bytes = parts[index] ?? Buffer.alloc(0)
      const answer = await send(await storage.signPart(place, index + 1, bytes.length), bytes)
      expect(answer.status).toBe(200)
      expect(answer.headers.get('etag')?.replaceAll('"', '')).toBe(md5(bytes))
    }
    const listed = await storage.listParts(place)
    expect(listed).toEqual(parts.map((bytes, index) => ({ partNumber: index + 1, size: bytes.length, etag: md5(bytes) })))
    const object = await storage.completeUpload(place, listed)
    expect(object.size).toBe(2 * PART + 1234)
    expect((await storage.read(place.key)).equals(Buffer.concat(parts))).toBe(true)
  })

  it('answers a second completion with the same object', async () => {
    const place = await begin()
    await send(await storage.signPart(place, 1, 1234), parts[2] ?? Buffer.alloc(0))
    const listed = await storage.listParts(place)
    const first = await storage.completeUpload(place, listed)
    expect(await storage.completeUpload(place, listed)).toEqual(first)
  })

  it('refuses a longer, a shorter and an unsigned part', async () => {
    const place = await begin()
    const url = await storage.signPart(place, 1, 1234)
    expect((await send(url, randomBytes(1235))).status).toBe(403)
    expect((await send(url, randomBytes(1233))).status).toBe(403)
    expect((await send(url.replace('partNumber=1', 'partNumber=2'), randomBytes(1234))).status).toBe(403)
    expect(await storage.listParts(place)).toEqual([])
    await storage.abortUpload(place)
  })

  it('refuses to join parts with a wrong entity tag', async () => {
    const place = await begin()
    await send(await storage.signPart(place, 1, 1234), parts[2] ?? Buffer.alloc(0))
    expect(await kindOf(storage.completeUpload(place, [{ partNumber: 1, size: 1234, etag: md5(Buffer.from('other')) }]))).toBe('bad-parts')
    await storage.abortUpload(place)
  })

  it('holds nothing of an aborted upload, and aborting twice is no error', async () => {
    const place = await begin()
    await send(await storage.signPart(place, 1, 1234), parts[2] ?? Buffer.alloc(0))
    await storage.abortUpload(place)
    await storage.abortUpload(place)
    expect(await kindOf(storage.listParts(place))).toBe('absent')
    expect(await storage.head(place.key)).toBeNull()
  })

  it('lists all parts when they take several pages', async () => {
    const place = await begin()
    const paged = createStorage(settings, 2)
    const numbers = [1, 2, 3, 4, 5]
    for (const number of numbers) await send(await storage.signPart(place, number, 3), Buffer.from('abc'))
    expect((await paged.listParts(place)).map(part => part.partNumber)).toEqual(numbers)
    paged.close()
    await storage.abortUpload(place)
  })
})

describe('objects', () => {
  it('gives back exactly the stretch that was asked for', async () => {
    const key = newKey()
    const bytes = randomBytes(100_000)
    await storage.put(key, bytes, 'application/octet-stream')
    expect((await storage.read(key, { start: 0, end: 0 })).equals(bytes.subarray(0, 1))).toBe(true)
    expect((await storage.read(key, { start: 4_321, end: 54_320 })).equals(bytes.subarray(4_321, 54_321))).toBe(true)
    expect(await storage.head(key)).toEqual({ size: 100_000, etag: md5(bytes), contentType: 'application/octet-stream' })
  })

  it('names what is absent as absent', async () => {
    expect(await storage.head('test/nothing')).toBeNull()
    expect(await kindOf(storage.read('test/nothing'))).toBe('absent')
    await storage.remove('test/nothing')
  })

  it('ends a download when its signal aborts', async () => {
    const key = newKey()
    await storage.put(key, randomBytes(8 * 1024 * 1024), 'application/octet-stream')
    const abort = new AbortController()
    const stream = await storage.open(key, { signal: abort.signal })
    stream.once('data', () => abort.abort())
    await expect((async () => {
      for await (const chunk of stream) expect(chunk.length).toBeGreaterThan(0)
    })()).rejects.toThrow()
    expect(stream.destroyed).toBe(true)
  })
})

describe('a storage that is away', () => {
  const nowhere = createStorage({ ...settings, endpoint: 'http://127.0.0.1:9', publicEndpoint: 'http://127.0.0.1:9' })

  it('is reported as away and as not up', async () => {
    expect(await nowhere.isUp()).toBe(false)
    expect(await storage.isUp()).toBe(true)
    expect(await kindOf(nowhere.head('test/any'))).toBe('away')
  })

  it('refuses a wrong secret without calling it away', async () => {
    const stranger = createStorage({ ...settings, secret: 'not-the-secret' })
    expect(await kindOf(stranger.read('test/any'))).toBe('refused')
    stranger.close()
    nowhere.close()
  })
})
