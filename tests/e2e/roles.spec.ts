import type { Page } from 'playwright-core'
import { beforeAll, describe, expect, it } from 'vitest'
import { createClient } from '../fixtures/api/client'
import { expectSeen, expectText, goTo, signInThroughForm, useChromium } from './browser'
import { DEMO } from './people'

const chrome = useChromium()
/** People of the demo clinic whom only its therapists know, and what is written about one of them. */
const CHARTED = ['Nadia Ferreyra', 'Joaquim Vestergaard', 'Walter Osei-Lind', 'Prue Hallworth', 'Orla Tennfjord']
const WRITTEN = [...CHARTED, 'AB-10417', 'kitchen counter', 'Right shoulder: support the forearm']

const ids = { nadia: '', session: '', clip: '' }
interface Row { id: string }
async function firstOf(path: string): Promise<string> {
  const client = createClient()
  await client.post('/api/auth/sign-in', DEMO.therapist)
  const { json } = await client.get(path)
  const items: Row[] = typeof json === 'object' && json !== null && 'items' in json && Array.isArray(json.items) ? json.items : []
  if (!items[0]) throw new Error(`nothing at ${path}`)
  return items[0].id
}
beforeAll(async () => {
  ids.nadia = await firstOf('/api/patients?search=Nadia')
  ids.session = await firstOf(`/api/patients/${ids.nadia}/sessions`)
  ids.clip = await firstOf(`/api/patients/${ids.nadia}/clips`)
})

/** The names of the places that the navigation offers. */
const placesOf = async (page: Page) => (await page.getByRole('navigation', { name: 'Main' }).getByRole('link').allTextContents()).map(text => text.trim())

/** What the window holds, on the screen and off it, the state that the server sent along included. */
const everythingIn = (page: Page) => page.evaluate(() => document.documentElement.innerHTML)

async function expectNothingOf(page: Page, secrets: readonly string[]): Promise<void> {
  const held = await everythingIn(page)
  expect(secrets.filter(secret => held.includes(secret))).toEqual([])
}

/** Pages on which a record of the demo clinic stands. */
const recordPages = () => [`/patients/${ids.nadia}`, `/patients/${ids.nadia}/details`, `/patients/${ids.nadia}/clips`, `/sessions/${ids.session}`, `/clips/${ids.clip}`]

describe('what a role sees', () => {
  it('gives a therapist the people on the care teams, and no clinic pages', async () => {
    const { page, allow } = await chrome.visit()
    await signInThroughForm(page, DEMO.therapist)
    expect(await placesOf(page)).toEqual(['Today', 'Patients', 'Sessions', 'Measures'])
    await goTo(page, '/patients')
    for (const name of CHARTED) await expectSeen(page.getByRole('rowheader', { name }))
    allow(/status of 403/)
    expect(await goTo(page, '/clinic/audit')).toBe(403)
    await expectSeen(page.getByRole('heading', { name: 'Not part of your role' }))
  })

  it('gives a student the measures and nobody\'s chart', async () => {
    const { page, allow } = await chrome.visit()
    await signInThroughForm(page, DEMO.student)
    expect(await placesOf(page)).toEqual(['Measures'])
    await expectSeen(page.getByRole('heading', { name: 'No teaching set is open for you yet' }))
    await expectNothingOf(page, WRITTEN)
    allow(/status of 403/)
    for (const path of ['/patients', '/patients/new', '/sessions', '/clinic', ...recordPages()]) {
      expect(await goTo(page, path), path).toBe(403)
      await expectNothingOf(page, WRITTEN)
    }
  })

  it('gives a patient a place of their own and nobody else\'s record', async () => {
    const { page, allow } = await chrome.visit()
    await signInThroughForm(page, DEMO.patient)
    await expectSeen(page.getByRole('heading', { name: 'Your own pages are not open yet' }))
    expect(await page.getByRole('navigation', { name: 'Main' }).count()).toBe(0)
    await expectNothingOf(page, CHARTED.filter(name => name !== 'Nadia Ferreyra'))
    allow(/status of 403/)
    for (const path of ['/patients', '/sessions', '/clinic', '/measures', ...recordPages()]) {
      expect(await goTo(page, path), path).toBe(403)
      await expectNothingOf(page, ['AB-10417', 'kitchen counter', ...CHARTED.slice(1)])
    }
  })

  it('gives an administrator members and audit trail, and a chart only with a reason that is kept', async () => {
    const { page, allow } = await chrome.visit()
    await signInThroughForm(page, DEMO.administrator)
    await page.waitForURL(url => url.pathname === '/clinic')
    expect(await placesOf(page)).toEqual(['Patients', 'Sessions', 'Clinic'])
    await expectSeen(page.getByRole('rowheader', { name: 'Maren Duarte, PT' }))
    allow(/status of 40[34]/)
    expect(await goTo(page, `/patients/${ids.nadia}`)).toBe(404)
    await expectNothingOf(page, WRITTEN)
    expect(await goTo(page, `/clips/${ids.clip}`)).toBe(403)
    await goTo(page, '/patients')
    await page.getByRole('button', { name: 'Open with a reason' }).click()
    const dialog = page.getByRole('dialog', { name: 'Open a chart with a reason' })
    await dialog.getByLabel('Record number').fill('AB-10395')
    const reason = `Complaint of the family, file ${Date.now()}`
    await dialog.getByLabel('Reason').fill(reason)
    await dialog.getByRole('button', { name: 'Open the chart' }).click()
    await expectSeen(page.getByRole('heading', { name: 'Prue Hallworth' }))
    await expectSeen(page.getByText(/^You opened this chart with a reason/))
    // Reading is all that it opens.
    expect(await page.getByRole('link', { name: 'Change details' }).count()).toBe(0)
    await goTo(page, '/clinic/audit')
    await expectSeen(page.getByText(reason))
  })

  it('gives a therapist of another clinic nothing of this one, in lists, searches and by address', async () => {
    const { page, allow } = await chrome.visit()
    await signInThroughForm(page, DEMO.otherClinic)
    await expectNothingOf(page, WRITTEN)
    await goTo(page, '/patients')
    await expectSeen(page.getByRole('rowheader', { name: 'Tilda Ashgrove' }))
    await expectNothingOf(page, WRITTEN)
    await goTo(page, '/patients?search=Nadia')
    await expectSeen(page.getByText('Nobody matches “Nadia”'))
    allow(/status of 404/)
    for (const path of recordPages()) {
      expect(await goTo(page, path), path).toBe(404)
      await expectNothingOf(page, WRITTEN)
    }
  })
})

describe('signing out', () => {
  it('ends the other tab too: what it asks next is refused, and nothing is lost when the same person signs in again', async () => {
    const { context, page, allow } = await chrome.visit()
    await signInThroughForm(page, DEMO.therapist)
    const other = await context.newPage()
    await goTo(other, `/patients/new`)
    await other.getByLabel('Name', { exact: true }).fill('Not lost by signing out')
    await page.getByRole('button', { name: 'Sign out' }).first().click()
    await page.waitForURL(url => url.pathname === '/sign-in')
    allow(/status of 401/)
    await other.getByLabel('Record number').fill(`R-${Date.now()}`)
    await other.getByLabel('Date of birth').fill('1950-02-03')
    await other.getByRole('radio', { name: 'Both', exact: true }).check()
    await other.getByRole('button', { name: 'Create the chart' }).click()
    const dialog = other.getByRole('dialog', { name: 'Sign in again' })
    await dialog.getByLabel('Password', { exact: true }).fill(DEMO.therapist.password)
    await dialog.getByRole('button', { name: 'Sign in', exact: true }).click()
    await dialog.waitFor({ state: 'hidden' })
    expect(await other.getByLabel('Name', { exact: true }).inputValue()).toBe('Not lost by signing out')
    // A fresh page of the first tab is signed in again with it: one browser, one session.
    await goTo(page, '/patients')
    expect(new URL(page.url()).pathname).toBe('/patients')
  })

  it('leaves nothing of a patient behind the back button', async () => {
    const { page } = await chrome.visit()
    await signInThroughForm(page, DEMO.therapist)
    await goTo(page, `/patients/${ids.nadia}`)
    await page.getByRole('link', { name: 'Details', exact: true }).click()
    await expectSeen(page.getByRole('heading', { name: 'Consents' }))
    await expectText(page.getByRole('heading', { level: 1 }), 'Nadia Ferreyra')
    await page.getByRole('button', { name: 'Sign out' }).first().click()
    await page.waitForURL(url => url.pathname === '/sign-in')
    for (let steps = 0; steps < 3; steps++) {
      await page.goBack({ waitUntil: 'load' }).catch(() => null)
      await expectSeen(page.getByRole('button', { name: 'Sign in', exact: true }))
      await expectNothingOf(page, WRITTEN)
    }
    const kept = await page.evaluate(async () => ({
      storages: JSON.stringify({ ...localStorage }) + JSON.stringify({ ...sessionStorage }),
      caches: await caches.keys(),
    }))
    expect(WRITTEN.filter(secret => kept.storages.includes(secret))).toEqual([])
    expect(kept.caches).toEqual([])
  })
})
