import { AxeBuilder } from '@axe-core/playwright'
import type { Page } from 'playwright-core'
import { beforeAll, describe, expect, it } from 'vitest'
import { createClient, type ApiClient } from '../fixtures/api/client'
import { makeClinic, makeTherapist } from '../fixtures/api/people'
import { makePatient, makeSession, makeStill } from '../fixtures/api/records'
import { DESK, expectSeen, goTo, PHONE, signInThroughForm, useChromium, type Visit } from './browser'
import { credentials, DEMO } from './people'

/** WCAG 2.2 at the levels A and AA, as axe-core tags its rules. No rule and no element is left out. */
const TAGS = ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa']
const THEMES = ['light', 'dark'] as const
const WINDOWS = [DESK, PHONE] as const
/** The narrowest window that must do, and a window of 1280 by 1024 at a zoom of 200 %. */
const NARROW = [{ width: 320, height: 640 }, { width: 640, height: 512 }] as const

const chrome = useChromium()

async function painted(page: Page): Promise<void> {
  await page.evaluate(() => new Promise(resolve => requestAnimationFrame(() => requestAnimationFrame(resolve))))
}

/** What axe finds on the page in both themes and both windows. */
async function violations(page: Page): Promise<string[]> {
  const found: string[] = []
  for (const viewport of WINDOWS) {
    await page.setViewportSize(viewport)
    for (const colorScheme of THEMES) {
      await page.emulateMedia({ colorScheme })
      await painted(page)
      // The pages have no frames, so that one pass in the page itself sees all there is.
      const result = await new AxeBuilder({ page }).setLegacyMode(true).withTags(TAGS).analyze()
      found.push(...result.violations.flatMap(({ id, nodes }) => nodes.map(node => `${viewport.width} px, ${colorScheme}: ${id} at ${node.target.join(' ')}: ${node.failureSummary?.split('\n').slice(1, 3).join(' ').trim()}`)))
    }
  }
  return found
}

/** Windows in which the page itself would have to be scrolled sideways, with how far and what sticks out. */
async function sidewaysScrolls(page: Page): Promise<string[]> {
  const found: string[] = []
  for (const viewport of NARROW) {
    await page.setViewportSize(viewport)
    await painted(page)
    const [over, widest] = await page.evaluate(() => {
      const edge = document.documentElement.clientWidth
      const out = [...document.body.querySelectorAll('*')].filter(element => element.getBoundingClientRect().right > edge + 1).map(element => `${element.tagName.toLowerCase()}.${element.className}`)
      return [document.documentElement.scrollWidth - edge, out.slice(0, 3).join(', ')] as const
    })
    if (over > 0) found.push(`${viewport.width} px: ${over} px too wide (${widest})`)
  }
  return found
}

/** The rules that hold on every page, checked on the page that is open. */
async function expectAccessible(page: Page): Promise<void> {
  expect(await page.title()).toMatch(/\S.* · Standmark$/)
  expect(await page.locator('h1:visible').count()).toBe(1)
  expect(await page.locator('main:visible').count()).toBe(1)
  expect(await violations(page)).toEqual([])
  expect(await sidewaysScrolls(page)).toEqual([])
  await page.setViewportSize(DESK)
  await page.emulateMedia({ colorScheme: 'light' })
}

describe('every page, in both themes, on a desk and on a phone', () => {
  interface Place { name: string, path: () => string, status?: number, until?: (page: Page) => Promise<void> }

  /** One visit of a person to a row of pages. */
  function pagesOf(who: string, arrive: (visit: Visit) => Promise<void>, places: readonly Place[]): void {
    describe(`for ${who}`, () => {
      let visit: Visit
      beforeAll(async () => {
        visit = await chrome.visit()
        await arrive(visit)
      })
      it.each(places)('$name', async ({ path, status = 200, until }) => {
        if (status >= 400) visit.allow(new RegExp(`status of ${status}`))
        expect(await goTo(visit.page, path())).toBe(status)
        await until?.(visit.page)
        await expectAccessible(visit.page)
      })
    })
  }

  const ids = { nadia: '', session: '', bout: '', clip: '', newcomer: '', emptySession: '', processing: '', refused: '' }
  let newcomer: { email: string, password: string }

  async function firstId(client: ApiClient, path: string, skip = 0): Promise<string> {
    const { json } = await client.get(path)
    const items: { id: string }[] = typeof json === 'object' && json !== null && 'items' in json && Array.isArray(json.items) ? json.items : []
    const id = items[skip]?.id
    if (!id) throw new Error(`nothing at ${path}`)
    return id
  }

  beforeAll(async () => {
    const client = createClient()
    await client.post('/api/auth/sign-in', DEMO.therapist)
    ids.nadia = await firstId(client, '/api/patients?search=Nadia')
    ids.session = await firstId(client, `/api/patients/${ids.nadia}/sessions`)
    const { json: session } = await client.get(`/api/sessions/${ids.session}`)
    ids.bout = typeof session === 'object' && session !== null && 'bouts' in session && Array.isArray(session.bouts) ? session.bouts[0].id : ''
    ids.clip = await firstId(client, `/api/sessions/${ids.session}/clips`, 1)

    const therapist = await makeTherapist(await makeClinic())
    newcomer = credentials(therapist)
    const patient = await makePatient(therapist, { name: 'Bartholomew Featherstonehaugh-Villanueva', massKg: null, heightCm: null })
    const empty = await makeSession(therapist, patient.id)
    ids.newcomer = patient.id
    ids.emptySession = empty.id
    const session2 = { id: empty.id, patientId: patient.id }
    ids.processing = (await makeStill(therapist, session2, { status: 'processing' })).clipId
    ids.refused = (await makeStill(therapist, session2, { status: 'refused' })).clipId
  })

  const onBench = (tab: string, settled: (page: Page) => Promise<void> = async () => {}) => async (page: Page) => {
    await expectSeen(page.getByRole('application').locator('canvas'))
    await page.getByRole('tab', { name: tab }).click()
    await settled(page)
  }
  const signIn = (who: { email: string, password: string }) => (visit: Visit) => signInThroughForm(visit.page, who)

  pagesOf('nobody in particular', async () => {}, [
    { name: 'sign-in', path: () => '/sign-in' },
  ])

  pagesOf('a therapist', signIn(DEMO.therapist), [
    { name: 'today', path: () => '/' },
    { name: 'patients', path: () => '/patients' },
    { name: 'patients, none found', path: () => '/patients?search=nobody-of-that-name' },
    { name: 'new patient', path: () => '/patients/new' },
    { name: 'new patient, with errors at the fields', path: () => '/patients/new', until: async (page) => {
      await page.getByRole('button', { name: 'Create the chart' }).click()
      await expectSeen(page.getByText('Fill this in.'))
    } },
    { name: 'timeline as a chart', path: () => `/patients/${ids.nadia}` },
    { name: 'timeline as a table', path: () => `/patients/${ids.nadia}?view=table` },
    { name: 'timeline with every measure', path: () => `/patients/${ids.nadia}`, until: async (page) => {
      await page.getByRole('button', { name: /^Measures,/ }).click()
      for (const box of await page.getByRole('checkbox').all()) await box.check()
    } },
    { name: 'sessions of a patient', path: () => `/patients/${ids.nadia}/sessions` },
    { name: 'clips of a patient', path: () => `/patients/${ids.nadia}/clips` },
    { name: 'details, consents and care team', path: () => `/patients/${ids.nadia}/details` },
    { name: 'a dialog: withdrawing a consent', path: () => `/patients/${ids.nadia}/details`, until: async (page) => {
      await page.getByRole('button', { name: 'Withdraw consent: Recording' }).click()
      await expectSeen(page.getByRole('dialog'))
    } },
    { name: 'change details', path: () => `/patients/${ids.nadia}/edit` },
    { name: 'new session', path: () => `/patients/${ids.nadia}/new-session` },
    { name: 'all sessions', path: () => '/sessions' },
    { name: 'a session with bouts and clips', path: () => `/sessions/${ids.session}` },
    { name: 'change a session', path: () => `/sessions/${ids.session}/edit` },
    { name: 'a new bout', path: () => `/sessions/${ids.session}/bouts/new` },
    { name: 'a bout with vital signs', path: () => `/sessions/${ids.session}/bouts/${ids.bout}` },
    { name: 'bench: body map of a marked still', path: () => `/clips/${ids.clip}`, until: onBench('Body map') },
    { name: 'bench: readings', path: () => `/clips/${ids.clip}`, until: onBench('Readings') },
    { name: 'bench: list of landmarks', path: () => `/clips/${ids.clip}`, until: onBench('List', page => page.getByRole('textbox', { name: /, x$/ }).first().waitFor()) },
    { name: 'bench: setting of the picture', path: () => `/clips/${ids.clip}`, until: onBench('Picture') },
    { name: 'bench: a frame that is not marked', path: () => `/clips/${ids.clip}?frame=3`, until: onBench('Body map') },
    { name: 'bench: keys', path: () => `/clips/${ids.clip}`, until: onBench('Body map', async (page) => {
      await page.getByRole('button', { name: 'Keys' }).click()
      await expectSeen(page.getByRole('dialog'))
    }) },
    { name: 'measures', path: () => '/measures' },
    { name: 'an address that leads nowhere', path: () => '/no/such/place', status: 404 },
    { name: 'a chart that is not there', path: () => '/patients/01890000-0000-7000-8000-000000000000', status: 404 },
    { name: 'a page of another role', path: () => '/clinic', status: 403 },
  ])

  pagesOf('a therapist who begins', visit => signInThroughForm(visit.page, newcomer), [
    { name: 'today with nothing in it', path: () => '/' },
    { name: 'a timeline with nothing on it', path: () => `/patients/${ids.newcomer}` },
    { name: 'a session with nothing in it', path: () => `/sessions/${ids.emptySession}` },
    { name: 'a new session without a body mass', path: () => `/patients/${ids.newcomer}/new-session` },
    { name: 'clips on their way and refused', path: () => `/patients/${ids.newcomer}/clips` },
    { name: 'bench: a clip that is being prepared', path: () => `/clips/${ids.processing}` },
    { name: 'bench: a clip that was refused', path: () => `/clips/${ids.refused}` },
  ])

  pagesOf('an administrator', signIn(DEMO.administrator), [
    { name: 'members of the clinic', path: () => '/clinic' },
    { name: 'audit trail', path: () => '/clinic/audit' },
    { name: 'patients, without charts of their own', path: () => '/patients' },
    { name: 'sessions', path: () => '/sessions' },
  ])

  pagesOf('a student', signIn(DEMO.student), [
    { name: 'what waits for a student', path: () => '/' },
    { name: 'measures', path: () => '/measures' },
  ])

  pagesOf('a patient', signIn(DEMO.patient), [
    { name: 'what waits for a patient', path: () => '/' },
  ])
})

describe('the keyboard alone', () => {
  interface Focus { name: string, isVisible: boolean, isMarked: boolean, tag: string }

  /** What has the focus, whether it can be seen, and whether it or the control around it is outlined. */
  function focus(page: Page): Promise<Focus> {
    return page.evaluate(() => {
      const element = document.activeElement
      if (!(element instanceof Element) || element === document.body) return { name: '', isVisible: false, isMarked: false, tag: 'body' }
      const labelled = element.id ? document.querySelector(`label[for="${element.id}"]`) : null
      const name = element.getAttribute('aria-label') ?? element.closest('label')?.textContent ?? labelled?.textContent ?? element.textContent ?? ''
      const around = [element, element.closest('label'), element.closest('.base-control'), ...element.children].filter(one => one instanceof Element)
      // The button that opens the calendar lies inside the browser's own control, which draws its ring itself.
      const isPickerButton = element.matches('input:is([type=date], [type=time], [type=datetime-local]):not(:focus-visible)')
      const isMarked = isPickerButton || around.some((one) => {
        const { outlineStyle, outlineWidth, stroke } = getComputedStyle(one)
        return (outlineStyle !== 'none' && Number.parseFloat(outlineWidth) >= 2) || (one instanceof SVGElement && stroke !== 'none' && one !== element)
      })
      const box = (element.closest('label') ?? element).getBoundingClientRect()
      const isVisible = box.width > 1 && box.height > 1 && box.bottom > 0 && box.right > 0 && box.top < innerHeight && box.left < innerWidth
      return { name: name.replace(/\s+/g, ' ').trim(), isVisible, isMarked, tag: element.tagName.toLowerCase() }
    })
  }

  async function tabTo(page: Page, name: string | RegExp): Promise<void> {
    const fits = (found: string) => typeof name === 'string' ? found === name : name.test(found)
    const passed: string[] = []
    for (let presses = 0; presses < 120; presses++) {
      await page.keyboard.press('Tab')
      const found = await focus(page)
      if (fits(found.name)) return
      passed.push(found.name)
    }
    throw new Error(`Tab never came to ${name}; it came to ${passed.join(' | ')}`)
  }

  it('leads from the sign-in to the readings of a still', { timeout: 120_000 }, async () => {
    const { page } = await chrome.visit()
    await goTo(page, '/sign-in')
    await tabTo(page, 'E-mail')
    await page.keyboard.type(DEMO.therapist.email)
    await tabTo(page, 'Password')
    await page.keyboard.type(DEMO.therapist.password)
    await page.keyboard.press('Enter')
    await page.waitForURL(url => url.pathname === '/')
    await expectSeen(page.getByRole('heading', { level: 1 }))

    await tabTo(page, 'Patients')
    await page.keyboard.press('Enter')
    await page.waitForURL(url => url.pathname === '/patients')
    await expectSeen(page.getByRole('table'))
    // A new page takes the focus to its content: the next Tab is in it, not in the navigation again.
    await expect.poll(() => page.evaluate(() => document.activeElement?.id)).toBe('main')
    await page.keyboard.press('Tab')
    expect(await page.evaluate(() => document.activeElement?.closest('main') !== null)).toBe(true)
    await tabTo(page, 'Nadia Ferreyra')
    await page.keyboard.press('Enter')
    await page.waitForURL(/\/patients\/[0-9a-f-]{36}$/)
    await tabTo(page, 'Chosen day')
    const slider = page.getByRole('slider', { name: 'Chosen day' })
    const newest = await slider.getAttribute('aria-valuetext')
    await page.keyboard.press('ArrowLeft')
    await expect.poll(() => slider.getAttribute('aria-valuetext')).not.toBe(newest)
    await page.keyboard.press('End')
    await expect.poll(() => slider.getAttribute('aria-valuetext')).toBe(newest)
    await page.keyboard.press('Shift+Tab')
    await tabTo(page, /^(Open the still|Chosen day)/)
    await page.evaluate(() => document.querySelector<SVGAElement>('a.timeline-point[tabindex="0"]')?.focus())
    await page.keyboard.press('Enter')
    await page.waitForURL(/\/clips\//)
    await expectSeen(page.getByRole('application').locator('canvas'))
    await tabTo(page, 'Body map')
    await page.keyboard.press('ArrowRight')
    expect((await focus(page)).name).toBe('Readings')
    await expectSeen(page.getByRole('tabpanel').getByText('Trunk lean', { exact: true }))
  })

  it('skips to the content', async () => {
    const { page } = await chrome.visit()
    await signInThroughForm(page, DEMO.therapist)
    await goTo(page, '/patients')
    await page.keyboard.press('Tab')
    expect(await focus(page)).toMatchObject({ name: 'Skip to content', isVisible: true })
    await page.keyboard.press('Enter')
    await expect.poll(() => page.evaluate(() => document.activeElement?.id)).toBe('main')
    await page.keyboard.press('Tab')
    expect(await page.evaluate(() => document.activeElement?.closest('main') !== null)).toBe(true)
  })

  it.each([['/'], ['/patients'], ['/patients/new'], ['/sessions']])('shows where the focus is at every stop of %s', async (path) => {
    const { page } = await chrome.visit()
    await signInThroughForm(page, DEMO.therapist)
    await goTo(page, path)
    const unseen: Focus[] = []
    for (let stops = 0; stops < 45; stops++) {
      await page.keyboard.press('Tab')
      const found = await focus(page)
      if (found.tag === 'body') break
      if (!found.isVisible || !found.isMarked) unseen.push(found)
    }
    expect(unseen).toEqual([])
  })

  it('stays in a dialog, leaves it by Escape and comes back to what opened it', async () => {
    const { page } = await chrome.visit()
    await signInThroughForm(page, DEMO.therapist)
    await goTo(page, '/patients')
    await page.getByRole('link', { name: 'Nadia Ferreyra' }).first().click()
    await page.getByRole('link', { name: 'Details', exact: true }).click()
    await page.getByRole('heading', { name: 'Consents' }).waitFor()
    const opener = page.getByRole('button', { name: 'Withdraw consent: Sharing' })
    await opener.focus()
    await page.keyboard.press('Enter')
    const dialog = page.getByRole('dialog')
    await dialog.waitFor()
    for (let stops = 0; stops < 12; stops++) {
      // Between its last and its first stop the focus passes the browser's own bar, which a page sees as its body.
      expect(await page.evaluate(() => document.activeElement === document.body || document.activeElement?.closest('dialog[open]') !== null)).toBe(true)
      await page.keyboard.press('Tab')
    }
    await page.keyboard.press('Escape')
    await dialog.waitFor({ state: 'hidden' })
    expect(await opener.evaluate(element => element === document.activeElement)).toBe(true)
  })
})
