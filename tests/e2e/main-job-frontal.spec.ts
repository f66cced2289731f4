import { describe, expect, it } from 'vitest'
import { TimelineSchema } from '#shared/schemas/timeline'
import { expectBody } from '../fixtures/api/answers'
import { fileOf, uploadClip, waitForClip } from '../fixtures/api/clips'
import { ClipStillsSchema } from '#shared/schemas/still'
import { benchOf } from './bench-page'
import { expectSeen, expectText, goTo, signInThroughForm, useChromium } from './browser'
import { demoFigure, expectShownAngles, expectStoredAngles, landmarkName, storedMarking, TOLERANCE_DEG } from './figure-marking'
import { credentials, makeWard } from './people'

const chrome = useChromium()
const FIGURE = demoFigure('walter-front-01.mp4')
const { truth } = FIGURE
const KNEES = ['kneeCentreLeft', 'kneeCentreRight', 'tragusLeft', 'tragusRight']
const at = (landmark: string) => truth.landmarks[landmark] ?? { x: Number.NaN, y: Number.NaN }

describe('the frontal view', () => {
  it('is marked by pointing and typing, reads the drawn angles on the person\'s own sides, and shows on the timeline', { timeout: 240_000 }, async () => {
    const ward = await makeWard()
    const file = await fileOf({ path: FIGURE.path, fileName: FIGURE.file, contentType: 'video/mp4' })
    const clip = await waitForClip(ward.therapist, (await uploadClip(ward.therapist, ward.sessionId, file, { view: 'frontal-anterior', side: undefined })).id)
    const { page } = await chrome.visit()
    await signInThroughForm(page, credentials(ward.therapist), `/clips/${clip.id}?frame=${FIGURE.frame}`)
    const bench = benchOf(page, truth)
    await bench.ready()
    await bench.waitForFrame(FIGURE.frame)
    await page.getByRole('button', { name: 'Mark this frame' }).click()

    // The guide asks for the core set and then for the plumb line, whatever its order; each press goes where it points.
    const byName = new Map(Object.keys(truth.landmarks).map(id => [landmarkName(id), id]))
    const title = page.locator('#marking-next-title')
    await expect.poll(async () => byName.has((await title.textContent() ?? '').trim())).toBe(true)
    const core: string[] = []
    for (let name = (await title.textContent() ?? '').trim(); byName.has(name); name = (await title.textContent() ?? '').trim()) {
      const landmark = byName.get(name) ?? ''
      core.push(landmark)
      await bench.press(at(landmark))
      await expect.poll(async () => (await title.textContent() ?? '').trim()).not.toBe(name)
    }
    expect(core).toEqual(expect.arrayContaining(['acromionLeft', 'acromionRight', 'asisLeft', 'asisRight', 'ankleCentreLeft', 'ankleCentreRight', 'sternalNotch']))
    await expectText(title, 'Plumb line')
    await page.getByRole('button', { name: 'Draw the plumb line' }).click()
    await bench.drag(truth.plumbLine.top, truth.plumbLine.bottom)
    await bench.tab('List')
    for (const landmark of [...core, ...KNEES]) await bench.type(landmarkName(landmark), at(landmark))
    await bench.tab('Picture')
    await bench.typeLine('Plumb line', { Top: truth.plumbLine.top, Bottom: truth.plumbLine.bottom })
    await bench.save(1)

    const [still] = expectBody(await ward.therapist.client.get(`/api/clips/${clip.id}/stills`), 200, ClipStillsSchema).items
    const marking = await storedMarking(ward.therapist, still?.id ?? '')
    expectStoredAngles(marking, truth)
    const shift = marking.readings.find(reading => reading.measure === 'midlineShift')
    expect(Math.abs((shift?.value ?? Number.NaN) - (truth.values.midlineShift ?? Number.NaN))).toBeLessThanOrEqual(0.01)
    await expectShownAngles(bench, marking, truth)

    const timeline = expectBody(await ward.therapist.client.get(`/api/patients/${ward.patientId}/timeline`), 200, TimelineSchema)
    const knees = timeline.readings.filter(reading => reading.measure === 'frontalKneeAngle')
    expect(knees.map(reading => reading.side).toSorted()).toEqual(['left', 'right'])
    for (const knee of knees) expect(Math.abs(knee.value - (truth.values[`frontalKneeAngle.${knee.side}`] ?? Number.NaN))).toBeLessThanOrEqual(TOLERANCE_DEG)
    await goTo(page, `/patients/${ward.patientId}?view=table`)
    await expectSeen(page.getByRole('table', { name: 'The same days as numbers' }).getByRole('link', { name: /° ±/ }))
  })
})
