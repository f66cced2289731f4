import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { z } from 'zod'
import type { Clip } from '#shared/schemas/clip'
import { ClipStillsSchema } from '#shared/schemas/still'
import { MarkingSchema } from '#shared/schemas/marking'
import { TimelineSchema } from '#shared/schemas/timeline'
import { expectBody } from '../fixtures/api/answers'
import { fileOf, pickStill, uploadClip, waitForClip } from '../fixtures/api/clips'
import { makeClinic, makeTherapist, unique } from '../fixtures/api/people'
import { benchOf } from './bench-page'
import { expectSeen, expectText, goTo, signInThroughForm, useChromium } from './browser'
import { demoFigure, expectShownAngles, expectStoredAngles, landmarkName, storedMarking } from './figure-marking'
import { credentials, makeWard, type Ward } from './people'

const chrome = useChromium()
const FIGURE = demoFigure('nadia-side-05.mp4')
const CORE = ['acromion', 'greaterTrochanter', 'lateralEpicondyle', 'lateralMalleolus', 'fifthMetatarsal']
const REST = ['heel', 'tragus', 'c7', 'canthus']
const { truth } = FIGURE
const at = (landmark: string) => truth.landmarks[landmark] ?? { x: Number.NaN, y: Number.NaN }
const lastOf = (path: string) => z.uuid().parse(path.split('/').at(-1))
const dayBefore = () => new Date(Date.now() - 86_400_000).toISOString().slice(0, 10)

describe('the job of a therapist', () => {
  it('leads from the sign-in over a clip to angles on the timeline that are those of the drawn figure', { timeout: 240_000 }, async () => {
    const therapist = await makeTherapist(await makeClinic())
    const { page } = await chrome.visit()
    await signInThroughForm(page, credentials(therapist))

    // A chart, and the consent without which nothing is recorded.
    await page.getByRole('link', { name: 'Patients' }).first().click()
    await page.getByRole('link', { name: 'New patient' }).first().click()
    await page.getByLabel('Name', { exact: true }).fill('Ilse Marchetti-Rowe')
    await page.getByLabel('Record number').fill(unique('E'))
    await page.getByLabel('Date of birth').fill('1961-05-17')
    await page.getByRole('radio', { name: 'Right', exact: true }).check()
    await page.getByLabel('Body mass').fill('64')
    await page.getByRole('button', { name: 'Create the chart' }).click()
    await page.waitForURL(/\/patients\/[0-9a-f-]{36}$/)
    const patientId = lastOf(new URL(page.url()).pathname)
    await expectSeen(page.getByRole('heading', { name: 'Nothing on the timeline yet' }))
    await page.getByRole('link', { name: 'Details', exact: true }).click()
    await page.getByRole('button', { name: 'Record consent: Recording' }).click()
    await page.getByRole('button', { name: 'Consent was given' }).click()
    await expectSeen(page.getByText(/^Given by Ilse Marchetti-Rowe on/))

    // A session with one bout.
    await page.getByRole('link', { name: 'Sessions', exact: true }).last().click()
    await page.getByRole('link', { name: 'New session' }).click()
    await page.getByLabel('Started').fill(`${dayBefore()}T09:00`)
    await page.getByRole('checkbox', { name: 'Second person present' }).check()
    await page.getByRole('button', { name: 'Start the session' }).click()
    await page.getByRole('link', { name: 'Add a bout' }).click()
    await page.getByLabel('Start', { exact: true }).fill('09:05:00')
    await page.getByRole('textbox', { name: /^End/ }).or(page.getByLabel('End', { exact: true })).first().fill('09:06:30')
    await page.getByLabel('Weight taken off the feet').fill('12.8')
    await page.getByRole('radio', { name: /^partial/ }).check()
    await page.getByRole('button', { name: 'Add this bout' }).click()
    await expectSeen(page.getByRole('heading', { name: 'Bout 1' }))

    // The clip, from the folder of the tablet straight to the storage.
    await page.getByLabel('Choose clips').setInputFiles({ name: 'standing, first try.mp4', mimeType: 'video/mp4', buffer: readFileSync(FIGURE.path) })
    await page.getByLabel('View').selectOption({ label: 'Side view' })
    await page.getByLabel('Side nearest the camera').selectOption({ label: truth.side === 'left' ? 'Left side' : 'Right side' })
    await page.getByLabel('Bout', { exact: true }).selectOption({ index: 1 })
    await page.getByRole('button', { name: 'Send 1 clip' }).click()
    const upload = page.getByRole('list', { name: 'Uploads of this session' })
    await upload.getByText('Ready to mark').waitFor({ timeout: 120_000 })
    await upload.getByRole('link', { name: 'Open the bench' }).click()

    // The frame that is meant, and no other.
    const bench = benchOf(page, truth)
    await page.waitForURL(/\/clips\//)
    await bench.ready()
    const clipId = lastOf(new URL(page.url()).pathname)
    await page.keyboard.press('Home')
    for (let tens = 0; tens < Math.floor(FIGURE.frame / 10); tens++) await page.keyboard.press('PageDown')
    for (let ones = 0; ones < FIGURE.frame % 10; ones++) await page.getByRole('button', { name: 'Next frame' }).click()
    await bench.waitForFrame(FIGURE.frame)
    await page.getByRole('button', { name: 'Mark this frame' }).click()

    // The core set by pointing, in the order of the guide.
    for (const landmark of CORE) {
      await expectText(page.locator('#marking-next-title'), landmarkName(landmark))
      await bench.press(at(landmark))
    }
    await expectText(page.locator('#marking-next-title'), 'Plumb line')
    await page.getByRole('button', { name: 'Draw the plumb line' }).click()
    await bench.drag(truth.plumbLine.top, truth.plumbLine.bottom)
    // A press is as exact as the screen: no worse than two pixels of it.
    await bench.tab('List')
    const box = await bench.stage.boundingBox()
    const press = 2 * Math.max(truth.width / (box?.width ?? 1), truth.height / (box?.height ?? 1))
    for (const landmark of CORE) {
      expect(Math.abs(Number(await bench.field(landmarkName(landmark), 'x').inputValue()) - at(landmark).x), landmark).toBeLessThanOrEqual(press)
      expect(Math.abs(Number(await bench.field(landmarkName(landmark), 'y').inputValue()) - at(landmark).y), landmark).toBeLessThanOrEqual(press)
    }
    // The exact places by their fields.
    for (const landmark of [...CORE, ...REST]) await bench.type(landmarkName(landmark), at(landmark))
    await bench.tab('Picture')
    await bench.typeLine('Plumb line', { Top: truth.plumbLine.top, Bottom: truth.plumbLine.bottom })
    await bench.save(1)

    const [still] = expectBody(await therapist.client.get(`/api/clips/${clipId}/stills`), 200, ClipStillsSchema).items
    expect(still?.frame).toBe(FIGURE.frame)
    const marking = await storedMarking(therapist, still?.id ?? '')
    expect(marking).toMatchObject({ version: 1, status: 'final', author: { id: therapist.id } })
    expectStoredAngles(marking, truth)
    await expectShownAngles(bench, marking, truth)

    // On the timeline: chart, and its table twin.
    await page.getByRole('link', { name: 'Back to the session' }).click()
    await page.waitForURL(/\/sessions\//)
    await goTo(page, `/patients/${patientId}`)
    const trunk = marking.readings.find(reading => reading.measure === 'trunkInclination')
    const shown = `${Math.round(trunk?.value ?? Number.NaN)}`.replace('-', '−')
    await expectSeen(page.getByRole('link', { name: new RegExp(`^Open the still: .*Trunk lean ${shown}°.*20\\s?% support`) }))
    await page.locator('label').filter({ hasText: /^\s*Table\s*$/ }).click()
    const table = page.getByRole('table', { name: 'The same days as numbers' })
    await expectSeen(table.getByRole('columnheader', { name: 'Trunk lean' }))
    await table.getByRole('link', { name: new RegExp(`^${shown}° ±`) }).click()
    await page.waitForURL(url => url.pathname === `/clips/${clipId}`)
    await bench.waitForFrame(FIGURE.frame)
    const timeline = expectBody(await therapist.client.get(`/api/patients/${patientId}/timeline`), 200, TimelineSchema)
    expect(timeline.readings.find(reading => reading.measure === 'trunkInclination')).toMatchObject({ value: trunk?.value, stillId: still?.id, markingVersion: 1 })
  })
})

describe('the marking bench', () => {
  let shared: Promise<Ward & { clip: Clip }> | null = null
  async function makeClip(): Promise<Ward & { clip: Clip }> {
    const ward = await makeWard()
    const uploaded = await uploadClip(ward.therapist, ward.sessionId, await fileOf({ path: FIGURE.path, fileName: FIGURE.file, contentType: 'video/mp4' }), { side: truth.side })
    return { ...ward, clip: await waitForClip(ward.therapist, uploaded.id) }
  }

  /** A still of a frame of its own in sight, whose trunk, thigh and shank are marked and saved. */
  async function openMarked(frame: number) {
    shared ??= makeClip()
    const ward = await shared
    const { clip } = ward
    const still = await pickStill(ward.therapist, clip.id, frame)
    const body = { facing: truth.facing, side: truth.side, landmarks: Object.fromEntries(CORE.map(name => [name, at(name)])), plumbLine: truth.plumbLine, status: 'final' }
    const first = expectBody(await ward.therapist.client.post(`/api/stills/${still.id}/markings`, body), 201, MarkingSchema)
    const { page, allow } = await chrome.visit()
    await signInThroughForm(page, credentials(ward.therapist), `/clips/${clip.id}?still=${still.id}`)
    const bench = benchOf(page, truth)
    await bench.ready()
    await bench.waitForFrame(frame)
    await bench.tab('List')
    await expect.poll(() => bench.field('Acromion', 'x').inputValue()).not.toBe('')
    return { ...ward, still, body, first, page, allow, bench }
  }
  const tenth = (value: number) => String(Math.round(value * 10) / 10)

  it('undoes, nudges, drops a gesture, keeps the draft over a reload, and shows both versions of a conflict', { timeout: 240_000 }, async () => {
    const { therapist, clinic, patientId, still, body, first, page, allow, bench } = await openMarked(FIGURE.frame)
    const x = bench.field('Acromion', 'x')
    const begin = tenth(at('acromion').x)
    expect(await x.inputValue()).toBe(begin)

    // Undo and redo, by key and by button, each one act.
    await bench.type('Acromion', { x: 300, y: 200 })
    expect([await x.inputValue(), await bench.field('Acromion', 'y').inputValue()]).toEqual(['300', '200'])
    await page.getByRole('heading', { level: 1 }).click()
    await page.keyboard.press('Control+z')
    await expect.poll(() => bench.field('Acromion', 'y').inputValue()).toBe(tenth(at('acromion').y))
    expect(await x.inputValue()).toBe('300')
    await page.getByRole('button', { name: 'Undo' }).click()
    await expect.poll(() => x.inputValue()).toBe(begin)
    await page.getByRole('button', { name: 'Redo' }).click()
    await expect.poll(() => x.inputValue()).toBe('300')
    await page.keyboard.press('Control+z')
    await expect.poll(() => x.inputValue()).toBe(begin)
    expect(await bench.state()).toContain('Saved, version 1')

    // Arrow keys move the selected landmark by 1, with Shift by 10, with Alt by a tenth; one press is one act.
    await page.getByRole('group', { name: 'Acromion' }).getByRole('button', { name: 'Acromion', exact: true }).click()
    await page.keyboard.press('ArrowRight')
    await expect.poll(() => x.inputValue()).toBe(tenth(at('acromion').x + 1))
    await page.keyboard.press('Shift+ArrowRight')
    await expect.poll(() => x.inputValue()).toBe(tenth(at('acromion').x + 11))
    await page.keyboard.press('Alt+ArrowLeft')
    await expect.poll(() => x.inputValue()).toBe(tenth(at('acromion').x + 10.9))
    expect(await bench.shownFrame()).toBe(FIGURE.frame)
    for (let times = 0; times < 3; times++) await page.keyboard.press('Control+z')
    await expect.poll(() => x.inputValue()).toBe(begin)

    // Escape while dragging: the gesture never was.
    const [from, to] = [await bench.toWindow(at('acromion')), await bench.toWindow({ x: at('acromion').x + 120, y: at('acromion').y })]
    await page.mouse.move(from.x, from.y)
    await page.mouse.down()
    await page.mouse.move(to.x, to.y, { steps: 4 })
    await expect.poll(async () => Number(await x.inputValue())).toBeGreaterThan(at('acromion').x + 100)
    await page.keyboard.press('Escape')
    await expect.poll(() => x.inputValue()).toBe(begin)
    await page.mouse.up()
    expect(await x.inputValue()).toBe(begin)
    expect(await bench.state()).toContain('Saved, version 1')

    // A reload finds the draft again.
    await bench.type('Acromion', { x: at('acromion').x + 20, y: at('acromion').y })
    await expect.poll(() => bench.state()).toContain('Draft kept')
    page.once('dialog', dialog => void dialog.accept())
    await page.reload()
    await bench.ready()
    await bench.waitForFrame(FIGURE.frame)
    await bench.tab('List')
    await expect.poll(() => bench.field('Acromion', 'x').inputValue()).toBe(tenth(at('acromion').x + 20))
    expect(await bench.state()).toContain('Draft kept')
    expect((await storedMarking(therapist, still.id)).version).toBe(1)

    // A colleague saves meanwhile: both versions are shown, and mine becomes the third.
    allow(/status of 412/)
    const colleague = await makeTherapist(clinic)
    expect((await therapist.client.post(`/api/patients/${patientId}/care-team`, { userId: colleague.id })).status).toBe(201)
    const theirs = { ...body, landmarks: { ...body.landmarks, greaterTrochanter: { x: at('greaterTrochanter').x + 30, y: at('greaterTrochanter').y } } }
    expectBody(await colleague.client.put(`/api/markings/${first.id}`, theirs, { ifMatch: 1 }), 200, MarkingSchema)
    await page.getByRole('button', { name: 'Save marking' }).click()
    const dialog = page.getByRole('dialog', { name: 'Someone saved this marking meanwhile' })
    await dialog.waitFor()
    await expectSeen(dialog.getByText('2 landmarks differ.'))
    const row = dialog.getByRole('row').filter({ has: page.getByRole('rowheader', { name: 'Trunk lean' }) })
    const [mine, other] = await row.getByRole('cell').allTextContents()
    expect(mine).toMatch(/\d+° ± \d/)
    expect(other).toMatch(/\d+° ± \d/)
    expect(mine).not.toBe(other)
    await dialog.getByRole('button', { name: 'Save mine as version 3' }).click()
    await dialog.waitFor({ state: 'hidden' })
    await expect.poll(() => bench.state()).toContain('Saved, version 3')
    const kept = await storedMarking(therapist, still.id)
    expect(kept.version).toBe(3)
    expect(kept.body.landmarks.acromion?.x).toBeCloseTo(at('acromion').x + 20, 1)
    expect(kept.body.landmarks.greaterTrochanter?.x).toBeCloseTo(at('greaterTrochanter').x, 1)
  })

  it('places to a tenth of a pixel by pointing once the picture is close', async () => {
    const { page, bench, still, therapist } = await openMarked(FIGURE.frame + 1)
    // A mouse points at whole pixels of the screen.
    const exact = await bench.toWindow(at('acromion'))
    const aim = { x: Math.round(exact.x), y: Math.round(exact.y) }
    await page.getByRole('button', { name: 'Remove Acromion' }).click()
    await page.mouse.move(aim.x, aim.y)
    for (let notch = 0; notch < 24; notch++) await page.mouse.wheel(0, -100)
    await page.mouse.click(aim.x, aim.y)
    // At the closest look a picture pixel is 24 wide: what the eye sees amiss, the hand corrects.
    const placed = { x: Number(await bench.field('Acromion', 'x').inputValue()), y: Number(await bench.field('Acromion', 'y').inputValue()) }
    expect(Math.hypot(placed.x - at('acromion').x, placed.y - at('acromion').y)).toBeLessThan(1.5)
    await page.mouse.down()
    await page.mouse.move(aim.x + (at('acromion').x - placed.x) * 24, aim.y + (at('acromion').y - placed.y) * 24, { steps: 3 })
    await page.mouse.up()
    await bench.save(2)
    const { body } = await storedMarking(therapist, still.id)
    expect(Math.abs((body.landmarks.acromion?.x ?? Number.NaN) - at('acromion').x)).toBeLessThanOrEqual(0.1)
    expect(Math.abs((body.landmarks.acromion?.y ?? Number.NaN) - at('acromion').y)).toBeLessThanOrEqual(0.1)
  })

  it('asks before one leaves with unsaved marks', async () => {
    const { page, bench } = await openMarked(FIGURE.frame + 2)
    await bench.type('Acromion', { x: 300, y: 200 })
    await page.getByRole('link', { name: 'Back to the session' }).click()
    const dialog = page.getByRole('dialog', { name: 'Leave with unsaved marks?' })
    await dialog.getByRole('button', { name: 'Stay here' }).click()
    await dialog.waitFor({ state: 'hidden' })
    expect(new URL(page.url()).pathname).toMatch(/^\/clips\//)
    expect(await bench.field('Acromion', 'x').inputValue()).toBe('300')
    await page.getByRole('link', { name: 'Back to the session' }).click()
    await dialog.getByRole('button', { name: 'Leave', exact: true }).click()
    await page.waitForURL(/\/sessions\//)
  })
})
