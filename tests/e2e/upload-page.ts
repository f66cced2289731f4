import { createHash } from 'node:crypto'
import { expect } from 'vitest'
import type { BrowserContext, Locator, Page } from 'playwright-core'
import { ClipListSchema, UploadStateSchema, type Clip } from '#shared/schemas/clip'
import { expectBody } from '../fixtures/api/answers'
import { query } from '../fixtures/api/database'
import { stack } from '../fixtures/api/environment'
import type { Person } from '../fixtures/api/people'
import { openStorage } from '../fixtures/api/storage'
import { goTo } from './browser'

/** The words of the interface that the tests look for. */
export const PICK = 'Choose clips'

/** The uploads that the session's page shows. */
export function uploadsOf(page: Page): Locator {
  return page.getByRole('list', { name: 'Uploads of this session' })
}

/** Opens the page of a session, ready to take clips. */
export async function openSession(page: Page, sessionId: string): Promise<void> {
  await goTo(page, `/sessions/${sessionId}`)
  await page.getByRole('heading', { name: 'Clips of this session' }).waitFor()
}

/** Notes every part that is sent to the storage, over all pages of a context. */
export function traceParts(context: BrowserContext): { readonly asked: number[] } {
  const asked: number[] = []
  const storage = new URL(stack.storage.endpoint).origin
  context.on('request', (request) => {
    const url = new URL(request.url())
    if (request.method() === 'PUT' && url.origin === storage) asked.push(Number(url.searchParams.get('partNumber')))
  })
  return { asked }
}

/** Makes the network of a page as slow as that of a ward, so that there is a middle in which it can be cut. */
export async function slowDown(page: Page, bytesPerSecond: number): Promise<void> {
  const session = await page.context().newCDPSession(page)
  await session.send('Network.enable')
  await session.send('Network.emulateNetworkConditions', { offline: false, latency: 0, downloadThroughput: -1, uploadThroughput: bytesPerSecond })
}

/** The newest clip of a session, as the server tells it. */
export async function newestClip(by: Person, sessionId: string): Promise<Clip> {
  const { items } = expectBody(await by.client.get(`/api/sessions/${sessionId}/clips`), 200, ClipListSchema)
  const [newest] = items
  if (!newest) throw new Error('the session has no clip')
  return newest
}

export async function clipsOf(by: Person, sessionId: string): Promise<Clip[]> {
  return expectBody(await by.client.get(`/api/sessions/${sessionId}/clips`), 200, ClipListSchema).items
}

/** Numbers of the parts that the storage holds of an open upload. */
export async function storedParts(by: Person, clipId: string): Promise<number[]> {
  return expectBody(await by.client.get(`/api/clips/${clipId}/upload`), 200, UploadStateSchema).parts.map(part => part.partNumber)
}

/** Waits until the storage holds at least so many parts. */
export async function untilStored(by: Person, clipId: string, count: number): Promise<number[]> {
  await expect.poll(async () => (await storedParts(by, clipId)).length, { timeout: 60_000, interval: 200 }).toBeGreaterThanOrEqual(count)
  return storedParts(by, clipId)
}

/** @returns size and SHA-256 of the object that the storage made of the parts. */
export async function storedObject(by: Person, clipId: string): Promise<{ size: number, sha256: string }> {
  const [row] = await query<{ original_key: string }>(by.clinic.id, 'select original_key from clip where id = $1', [clipId])
  const hash = createHash('sha256')
  let size = 0
  for await (const chunk of await openStorage().open(row?.original_key ?? '')) {
    const bytes = Buffer.from(chunk)
    hash.update(bytes)
    size += bytes.length
  }
  return { size, sha256: hash.digest('hex') }
}

/** What the browser itself keeps of unfinished uploads. */
export function keptNotes(page: Page): Promise<Record<string, unknown>[]> {
  return page.evaluate(() => new Promise<Record<string, unknown>[]>((resolve, reject) => {
    const opening = indexedDB.open('standmark-uploads')
    opening.onerror = () => reject(opening.error)
    opening.onsuccess = () => {
      const database = opening.result
      if (!database.objectStoreNames.contains('upload')) {
        database.close()
        return resolve([])
      }
      const reading = database.transaction('upload').objectStore('upload').getAll()
      reading.onsuccess = () => {
        database.close()
        resolve(reading.result)
      }
    }
  }))
}
