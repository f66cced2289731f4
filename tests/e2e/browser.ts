import { mkdtemp, rm } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { setTimeout as sleep } from 'node:timers/promises'
import { chromium, type Browser, type BrowserContext, type BrowserContextOptions, type Locator, type Page } from 'playwright-core'
import { afterAll, afterEach, beforeAll, expect } from 'vitest'
import { closeDatabase } from '../fixtures/api/database'
import { stack } from '../fixtures/api/environment'

/** Debian's Chromium does not look anything up by itself with these; as root it needs the sandbox off. */
const FLAGS = [
  '--no-sandbox', '--disable-gpu', '--disable-quic', '--no-first-run', '--disable-background-networking',
  '--disable-component-update', '--disable-sync',
]
const PATIENCE_MS = 30_000
/** A desk: wide enough for every column of the bench. */
export const DESK = { width: 1440, height: 900 } as const
/** A phone held upright. */
export const PHONE = { width: 390, height: 844 } as const

export interface Visit {
  readonly context: BrowserContext
  readonly page: Page
  /** Says that a kind of fault is what the test brings about; everything else still fails it. */
  readonly allow: (expected: RegExp) => void
  readonly close: () => Promise<void>
}

interface Watched { readonly faults: string[], readonly allowed: RegExp[] }
type VisitOptions = Pick<BrowserContextOptions, 'colorScheme' | 'reducedMotion' | 'deviceScaleFactor' | 'hasTouch' | 'isMobile' | 'storageState'> & { viewport?: { width: number, height: number } }

/** Where a page may ask for anything: the application, and the storage to which parts are sent. */
function mayAsk(url: string): boolean {
  if (!/^https?:|^wss?:/.test(url)) return true
  const { origin, port } = new URL(url)
  const own = new URL(stack.baseUrl)
  return origin === own.origin || origin === `http://localhost:${own.port || port}` || origin === new URL(stack.storage.endpoint).origin
}

/** Everything that a page must never do unasked: throw, complain on the console, break its own rules, ask a stranger. */
async function watchFaults(context: BrowserContext, { faults }: Watched): Promise<void> {
  context.on('request', (request) => {
    if (!mayAsk(request.url())) faults.push(`asked a stranger: ${request.url()}`)
  })
  context.on('console', (message) => {
    if (message.type() === 'error') faults.push(`console: ${message.text()} (${message.location().url})`)
  })
  context.on('weberror', error => faults.push(`threw: ${error.error().stack ?? error.error().message}`))
  await context.addInitScript(() => {
    addEventListener('securitypolicyviolation', event => console.error(`policy: ${event.violatedDirective} ${event.blockedURI} ${event.sourceFile}:${event.lineNumber}`))
  })
}

/**
 * One Chromium for a spec file, with a context for each visit. After each test the faults of all open visits are looked
 * at, and none may be there; at the end of the file everything is closed.
 */
export function useChromium() {
  let browser: Browser | null = null
  let profile = ''
  const visits = new Map<Visit, Watched>()

  beforeAll(async () => {
    profile = await mkdtemp(join(tmpdir(), 'standmark-chromium-'))
    browser = await chromium.launch({ executablePath: process.env.STANDMARK_TEST_CHROMIUM || '/usr/bin/chromium', args: [...FLAGS, `--disk-cache-dir=${profile}`] })
  })
  afterEach(async ({ task }) => {
    const folder = process.env.STANDMARK_TEST_PICTURES
    if (folder && task.result?.state === 'fail') await takePictures(folder, task.name, [...visits.keys()])
    const found = [...visits.values()].flatMap(({ faults, allowed }) => faults.splice(0).filter(fault => !allowed.some(expected => expected.test(fault))))
    for (const { allowed } of visits.values()) allowed.length = 0
    expect(found).toEqual([])
  })
  afterAll(async () => {
    for (const visit of [...visits.keys()]) await visit.close()
    await browser?.close()
    await rm(profile, { recursive: true, force: true })
    await closeDatabase()
  })

  async function visit(options: VisitOptions = {}): Promise<Visit> {
    if (!browser) throw new Error('Chromium is not there yet')
    const context = await browser.newContext({ baseURL: stack.baseUrl, viewport: DESK, locale: 'en-GB', colorScheme: 'light', reducedMotion: 'reduce', ...options })
    context.setDefaultTimeout(PATIENCE_MS)
    const watched: Watched = { faults: [], allowed: [] }
    await watchFaults(context, watched)
    const page = await context.newPage()
    const opened: Visit = {
      context,
      page,
      allow: expected => watched.allowed.push(expected),
      async close() {
        visits.delete(opened)
        await context.close()
        expect(watched.faults.filter(fault => !watched.allowed.some(expected => expected.test(fault)))).toEqual([])
      },
    }
    visits.set(opened, watched)
    return opened
  }

  return { visit }
}

/** What the open pages showed when a test failed, for whoever looks for the reason. */
async function takePictures(folder: string, name: string, visits: readonly Visit[]): Promise<void> {
  for (const [index, { page }] of visits.entries()) {
    await page.screenshot({ path: join(folder, `${name.replace(/\W+/g, '-').slice(0, 60)}-${index}.png`) })
  }
}

/** Waits until something holds; for hooks too, where vitest has no polling of its own. */
export async function until(holds: () => Promise<boolean>, what: string): Promise<void> {
  const end = Date.now() + PATIENCE_MS
  while (!await holds()) {
    if (Date.now() > end) throw new Error(`waited ${PATIENCE_MS / 1000} s in vain: ${what}`)
    await sleep(40)
  }
}

/** Waits until the page answers to clicks: what the server drew has been taken over by the browser. */
export async function hydrated(page: Page): Promise<void> {
  await until(() => page.evaluate(() => {
    const nuxt: unknown = Reflect.get(globalThis, 'useNuxtApp')
    return typeof nuxt === 'function' && nuxt()?.isHydrating === false
    // A page that is on its way to another one has no answer.
  }).catch(() => false), 'the page is taken over by the browser')
}

/** Opens an address and waits until it can be used. @returns the status of the document. */
export async function goTo(page: Page, path: string): Promise<number> {
  const answer = await page.goto(path, { waitUntil: 'load' })
  await hydrated(page)
  return answer?.status() ?? 0
}

/** Signs in through the form, as a person does, and waits until the first page of that person is there. */
export async function signInThroughForm(page: Page, { email, password }: { email: string, password: string }, next = '/'): Promise<void> {
  await goTo(page, next === '/' ? '/sign-in' : `/sign-in?next=${encodeURIComponent(next)}`)
  await page.getByLabel('E-mail').fill(email)
  await page.getByLabel('Password', { exact: true }).fill(password)
  await page.getByRole('button', { name: 'Sign in', exact: true }).click()
  await page.waitForURL(url => url.pathname !== '/sign-in')
  await page.getByRole('heading', { name: 'Sign in', exact: true }).waitFor({ state: 'hidden' })
  await page.getByRole('heading', { level: 1 }).first().waitFor()
}

/** Waits until the text of an element fits. */
export async function expectText(locator: Locator, expected: string | RegExp): Promise<void> {
  const text = () => locator.textContent().then(found => found?.replace(/\s+/g, ' ').trim())
  await (typeof expected === 'string' ? expect.poll(text, { timeout: PATIENCE_MS }).toBe(expected) : expect.poll(text, { timeout: PATIENCE_MS }).toMatch(expected))
}

/** Waits until an element is to be seen. */
export async function expectSeen(locator: Locator): Promise<void> {
  await locator.first().waitFor({ state: 'visible' })
}
