import { createHash } from 'node:crypto'
import { readFileSync } from 'node:fs'
import { readFile } from 'node:fs/promises'
import { basename } from 'node:path'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import AxeBuilder from '@axe-core/playwright'
import type { FileChooser, Page } from 'playwright-core'
import { makeBigClip, type BigClip } from '../fixtures/big/big-clip.mjs'
import { makeBadInput } from '../fixtures/bad/bad-inputs.mjs'
import { makeNumberedClip } from '../fixtures/numbered/numbered-clips.mjs'
import { waitForClip } from '../fixtures/api/clips'
import { closeStorage } from '../fixtures/api/storage'
import { makeBout, makePatient, makeSession } from '../fixtures/api/records'
import { DESK, expectSeen, PHONE, signInThroughForm, useChromium, type Visit } from './browser'
import { demoFigure } from './figure-marking'
import { credentials, makeWard, type Ward } from './people'
import { clipsOf, keptNotes, newestClip, openSession, PICK, slowDown, storedObject, storedParts, traceParts, untilStored, uploadsOf } from './upload-page'

const chrome = useChromium()
const MIB = 2 ** 20
/** A fast ward network: slow enough to be cut in the middle of a file. */
const WARD_NETWORK = 24 * MIB
const PREPARED_MS = 150_000
const DEMO = readFileSync(demoFigure('nadia-side-05.mp4').path)
let big: BigClip
/** The name that the browser sees. */
let bigName: string

beforeAll(async () => {
  big = await makeBigClip()
  bigName = basename(big.path)
}, 120_000)
afterAll(closeStorage)

/** A signed-in therapist on the page of a session. */
async function enter(ward: Ward, options: Parameters<typeof chrome.visit>[0] = {}): Promise<Visit> {
  const visit = await chrome.visit(options)
  await signInThroughForm(visit.page, credentials(ward.therapist))
  await openSession(visit.page, ward.sessionId)
  return visit
}

async function drop(page: Page, files: { name: string, base64: string }[]): Promise<void> {
  const transfer = await page.evaluateHandle((given) => {
    const data = new DataTransfer()
    for (const { name, base64 } of given) data.items.add(new File([Uint8Array.from(atob(base64), letter => letter.charCodeAt(0))], name, { type: 'video/mp4' }))
    return data
  }, files)
  const place = page.getByText('Drop clips here, or')
  await place.dispatchEvent('dragover', { dataTransfer: transfer })
  await place.dispatchEvent('drop', { dataTransfer: transfer })
}

async function sendBig(page: Page): Promise<void> {
  await page.getByLabel(PICK).setInputFiles(big.path)
  await page.getByRole('button', { name: 'Send 1 clip' }).click()
  await expectSeen(uploadsOf(page).getByText(bigName))
}

describe('sending a clip', () => {
  it('takes a clip that is dropped, and shows its picture when it is ready', { timeout: 240_000 }, async () => {
    const ward = await makeWard()
    const bout = await makeBout(ward.therapist, ward.sessionId, 0)
    const { page } = await enter(ward)
    await drop(page, [{ name: 'stand one.mp4', base64: DEMO.toString('base64') }])
    await page.getByLabel('View', { exact: true }).selectOption({ label: 'Side view' })
    // The patient's weaker side is the one to look at.
    expect(await page.getByLabel('Side nearest the camera').inputValue()).toBe('left')
    await page.getByLabel('Bout', { exact: true }).selectOption({ index: 1 })
    await page.getByLabel('Recorded').fill('2026-11-02T09:01:30')
    await page.getByRole('button', { name: 'Send 1 clip' }).click()
    await uploadsOf(page).getByText('Ready to mark').waitFor({ timeout: PREPARED_MS })

    const picture = page.locator('img[src$="/poster"]')
    await picture.waitFor()
    await picture.scrollIntoViewIfNeeded()
    await expect.poll(() => picture.evaluate(node => node instanceof HTMLImageElement ? node.naturalWidth : 0)).toBeGreaterThan(100)
    expect(await newestClip(ward.therapist, ward.sessionId)).toMatchObject({ status: 'ready', view: 'sagittal', side: 'left', boutId: bout.id, recordedAt: '2026-11-02T09:01:30.000Z', fileName: 'stand one.mp4' })
    await expectSeen(page.getByText(/Left side, Bout 1/))
    expect(await page.getByRole('link', { name: /^Open the bench/ }).first().getAttribute('href')).toMatch(/^\/clips\//)
  })

  it('sends several files at once and prepares each of them', { timeout: 300_000 }, async () => {
    const ward = await makeWard()
    const { page } = await enter(ward)
    const files = await Promise.all(['constant-25', 'webm-vp9', 'turned-phone'].map(async (name) => {
      const { fileName, contentType, path } = await makeNumberedClip(name)
      return { name: fileName, mimeType: contentType, buffer: await readFile(path) }
    }))
    await page.getByLabel(PICK).setInputFiles(files)
    await page.getByRole('button', { name: 'Send 3 clips' }).click()
    await expect.poll(() => uploadsOf(page).getByText('Ready to mark').count(), { timeout: PREPARED_MS, interval: 500 }).toBe(3)
    expect((await clipsOf(ward.therapist, ward.sessionId)).map(clip => clip.status)).toEqual(['ready', 'ready', 'ready'])
  })

  it('does not even begin with what is plainly no clip', async () => {
    const ward = await makeWard()
    const { page } = await enter(ward)
    await page.getByLabel(PICK).setInputFiles([{ name: 'notes.txt', mimeType: 'text/plain', buffer: Buffer.from('stood well') }, { name: 'empty.mp4', mimeType: 'video/mp4', buffer: Buffer.alloc(0) }])
    await expectSeen(page.getByText('This is not a video. Pick the clip itself'))
    await expectSeen(page.getByText('The file is empty.'))
    expect(await page.getByRole('button', { name: /^Send/ }).count()).toBe(0)
  })

  it('names the reason when the server refuses a text that is called .mp4', { timeout: 120_000 }, async () => {
    const ward = await makeWard()
    const { page } = await enter(ward)
    const bad = await makeBadInput('text')
    await page.getByLabel(PICK).setInputFiles({ name: 'notes.mp4', mimeType: 'video/mp4', buffer: await readFile(bad.path) })
    await page.getByRole('button', { name: 'Send 1 clip' }).click()
    await uploadsOf(page).getByText('This is not a video. Pick the clip itself').waitFor({ timeout: 60_000 })
    await expectSeen(page.getByText('This clip cannot be used'))
    expect(await newestClip(ward.therapist, ward.sessionId)).toMatchObject({ status: 'refused', reason: 'not-a-video' })
  })

  it('says before anything is sent that there is no consent, and where it is given', async () => {
    const ward = await makeWard()
    const patient = await makePatient(ward.therapist)
    const session = await makeSession(ward.therapist, patient.id)
    const { page, context } = await enter(ward)
    const parts = traceParts(context)
    await openSession(page, session.id)
    await expectSeen(page.getByText('No consent to recording'))
    expect(await page.getByLabel(PICK).count()).toBe(0)
    await page.getByRole('link', { name: 'Record the consent' }).click()
    await page.waitForURL(`**/patients/${patient.id}/details`)
    expect(parts.asked).toEqual([])
  })

  it('can be stopped: it asks by the name of the file, and nothing is left of it', { timeout: 120_000 }, async () => {
    const ward = await makeWard()
    const { page } = await enter(ward)
    await slowDown(page, WARD_NETWORK)
    await sendBig(page)
    await expect.poll(async () => (await clipsOf(ward.therapist, ward.sessionId)).length).toBe(1)
    const clip = await newestClip(ward.therapist, ward.sessionId)
    await untilStored(ward.therapist, clip.id, 2)
    await page.getByRole('button', { name: `Cancel ${bigName}` }).click()
    const question = page.getByRole('dialog', { name: `Stop sending ${bigName}?` })
    await question.getByRole('button', { name: 'Cancel' }).click()
    await uploadsOf(page).getByText('Cancelled').waitFor()
    expect((await ward.therapist.client.get(`/api/clips/${clip.id}`)).status).toBe(404)
    expect(await clipsOf(ward.therapist, ward.sessionId)).toEqual([])
    expect(await keptNotes(page)).toEqual([])
  })
})

describe('an upload that is cut', () => {
  it('waits while the network is away, goes on after the page was closed, and sends no stored part twice', { timeout: 400_000 }, async () => {
    const ward = await makeWard()
    const visit = await enter(ward)
    const { context } = visit
    let { page } = visit
    visit.allow(/ERR_INTERNET_DISCONNECTED|ERR_NETWORK_IO_SUSPENDED|ERR_FAILED|ERR_ABORTED/)
    const parts = traceParts(context)
    await slowDown(page, WARD_NETWORK)
    await sendBig(page)
    await expect.poll(async () => (await clipsOf(ward.therapist, ward.sessionId)).length).toBe(1)
    const clip = await newestClip(ward.therapist, ward.sessionId)
    await untilStored(ward.therapist, clip.id, 4)

    // The network goes away and comes back.
    await context.setOffline(true)
    await uploadsOf(page).getByText('No network. It goes on by itself').waitFor()
    const heldOffline = await storedParts(ward.therapist, clip.id)
    const askedBefore = parts.asked.length
    await page.waitForTimeout(1500)
    expect(parts.asked).toHaveLength(askedBefore)
    await context.setOffline(false)
    await slowDown(page, WARD_NETWORK)
    await untilStored(ward.therapist, clip.id, heldOffline.length + 4)
    const askedAfter = parts.asked.slice(askedBefore)
    expect(askedAfter.filter(part => heldOffline.includes(part))).toEqual([])

    // The page is closed in the middle. What the browser keeps names neither the file nor the person.
    const [note] = await keptNotes(page)
    expect(Object.keys(note ?? {}).sort()).toEqual(['begunAt', 'clipId', 'fingerprint', 'userId'])
    await page.close()
    const held = await storedParts(ward.therapist, clip.id)
    expect(held.length).toBeLessThan(Math.ceil(big.bytes / (8 * MIB)))
    const askedTillClosed = parts.asked.length

    page = await context.newPage()
    await openSession(page, ward.sessionId)
    await uploadsOf(page).getByText('Cut off. What was sent is kept.').waitFor()
    // Another file is not taken for it.
    await chooseAgain(page, { name: 'other.mp4', mimeType: 'video/mp4', buffer: DEMO })
    await expectSeen(page.getByText('That is another file'))
    await chooseAgain(page, big.path)
    await uploadsOf(page).getByText('Ready to mark').waitFor({ timeout: PREPARED_MS })

    expect(parts.asked.slice(askedTillClosed).filter(part => held.includes(part))).toEqual([])
    expect(await waitForClip(ward.therapist, clip.id)).toMatchObject({ status: 'ready', frameCount: big.presented.length })
    expect(await storedObject(ward.therapist, clip.id)).toEqual({ size: big.bytes, sha256: createHash('sha256').update(await readFile(big.path)).digest('hex') })
    expect(await keptNotes(page)).toEqual([])
  })

  it('goes on by itself after a reload where the browser can open the file again', { timeout: 240_000 }, async () => {
    const ward = await makeWard()
    const visit = await chrome.visit()
    const { page, context } = visit
    visit.allow(/ERR_ABORTED/)
    // The file dialogue belongs to the system: it answers with a file of the browser's own file system instead.
    await context.addInitScript(() => {
      Reflect.set(window, 'showOpenFilePicker', async () => {
        const folder = await navigator.storage.getDirectory()
        return [await folder.getFileHandle('from the tablet.mp4')]
      })
    })
    await signInThroughForm(page, credentials(ward.therapist))
    await openSession(page, ward.sessionId)
    await page.evaluate(async ({ base64, filling }) => {
      const folder = await navigator.storage.getDirectory()
      const handle = await folder.getFileHandle('from the tablet.mp4', { create: true })
      const writer = await handle.createWritable()
      const head = new DataView(new ArrayBuffer(8))
      head.setUint32(0, filling + 8)
      head.setUint32(4, 0x66726565)
      await writer.write(Uint8Array.from(atob(base64), letter => letter.charCodeAt(0)))
      await writer.write(head)
      for (let at = 0; at < filling; at += 2 ** 20) await writer.write(new Uint8Array(2 ** 20).fill(at >> 20))
      await writer.close()
    }, { base64: DEMO.toString('base64'), filling: 64 * MIB })
    await slowDown(page, 12 * MIB)
    await page.locator('button', { hasText: PICK }).click()
    await page.getByRole('button', { name: 'Send 1 clip' }).click()
    await expect.poll(async () => (await clipsOf(ward.therapist, ward.sessionId)).length).toBe(1)
    const clip = await newestClip(ward.therapist, ward.sessionId)
    const held = await untilStored(ward.therapist, clip.id, 2)
    // Leaving asks first; the person insists.
    page.on('dialog', dialog => void dialog.accept())
    const parts = traceParts(context)
    await page.reload()
    await uploadsOf(page).getByText('Ready to mark').or(page.getByText('Ready to mark')).first().waitFor({ timeout: PREPARED_MS })
    expect(parts.asked.filter(part => held.includes(part))).toEqual([])
    expect((await waitForClip(ward.therapist, clip.id)).status).toBe('ready')
  })

  it('leaves nothing in the browser of somebody who signs out', { timeout: 120_000 }, async () => {
    const ward = await makeWard()
    const visit = await enter(ward)
    const { page } = visit
    visit.allow(/ERR_ABORTED/)
    await slowDown(page, WARD_NETWORK)
    await sendBig(page)
    await expect.poll(async () => (await keptNotes(page)).length).toBe(1)
    await page.getByRole('button', { name: 'Sign out' }).click()
    await page.waitForURL(/\/sign-in/)
    await expect.poll(() => keptNotes(page)).toEqual([])
    await signInThroughForm(page, credentials(ward.therapist))
    await openSession(page, ward.sessionId)
    await expectSeen(page.getByText('Upload not finished. Go on in the browser where it was begun'))
    expect(await uploadsOf(page).count()).toBe(0)
  })
})

describe('the page while clips are chosen and sent', () => {
  it.each([['desk, light', DESK, 'light'], ['phone, dark', PHONE, 'dark']] as const)('has no fault that axe can find (%s)', { timeout: 120_000 }, async (_name, viewport, colorScheme) => {
    const ward = await makeWard()
    const { page } = await enter(ward, { viewport, colorScheme })
    const faults = async () => (await new AxeBuilder({ page }).analyze()).violations.map(({ id, nodes }) => `${id}: ${nodes.map(node => node.target.join(' ')).join(', ')}`)
    const width = () => page.evaluate(() => document.documentElement.scrollWidth)
    await page.getByText('Taking the clip').click()
    await page.getByLabel(PICK).setInputFiles([
      { name: 'a very long name of a recording that a camera or a person gave to this clip.mp4', mimeType: 'video/mp4', buffer: DEMO },
      { name: 'empty.mp4', mimeType: 'video/mp4', buffer: Buffer.alloc(0) },
    ])
    await expectSeen(page.getByText('The file is empty.'))
    expect(await faults()).toEqual([])
    expect(await width()).toBeLessThanOrEqual(viewport.width)
    await page.getByRole('button', { name: 'Send 1 clip' }).click()
    await uploadsOf(page).getByText('Ready to mark').waitFor({ timeout: 100_000 })
    expect(await faults()).toEqual([])
    expect(await width()).toBeLessThanOrEqual(viewport.width)
  })
})

async function chooseAgain(page: Page, file: Parameters<FileChooser['setFiles']>[0]): Promise<void> {
  const dialogue = page.waitForEvent('filechooser')
  await uploadsOf(page).getByRole('button', { name: 'Go on' }).click()
  await (await dialogue).setFiles(file)
}
