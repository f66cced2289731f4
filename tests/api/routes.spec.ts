import { readdirSync, readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { z } from 'zod'
import { PERMISSIONS, rolesMay, type Permission } from '#shared/schemas/permissions'
import { ROLES } from '#shared/types/role'
import { comparable, expectError } from '../fixtures/api/answers'
import { createClient, type Answer, type ApiClient } from '../fixtures/api/client'
import { makeReadyClip, pickStill } from '../fixtures/api/clips'
import { closeDatabase, listTables, query } from '../fixtures/api/database'
import { stack } from '../fixtures/api/environment'
import { makeAccount, makeAdministrator, makeClinic, makePatientAccount, makeStudent, makeTherapist, signIn, type Person } from '../fixtures/api/people'
import { makeBout, makeConsent, makeMarking, makePatient, makeSession } from '../fixtures/api/records'
import { idsOf, listRouteFiles, methodOf, pathOf, ROUTES, type Ids, type RouteCase } from '../fixtures/api/route-table'

afterAll(closeDatabase)

const ABSENT = '01900000-0000-7000-8000-000000000000'
const MALFORMED = ['1', 'me', ABSENT.slice(1), `${ABSENT}0`, '%00', '%27%20or%201=1', '..%2F..']
const ABSENT_IDS: Ids = { patient: ABSENT, user: ABSENT, consent: ABSENT, session: ABSENT, bout: ABSENT, clip: ABSENT, still: ABSENT, marking: ABSENT }

const withIds = ROUTES.filter(route => route.ids !== undefined)
const changing = ROUTES.filter(route => methodOf(route) !== 'GET')
const reading = ROUTES.filter(route => methodOf(route) === 'GET')
const guarded = ROUTES.filter(route => route.can !== 'public')
const named = (routes: readonly RouteCase[]) => routes.map(route => [route.route, route] as const)

/** Calls a route with these ids in its path; bodies and versions are right, so that only who asks decides. */
function call(route: RouteCase, client: ApiClient, values: readonly string[] | string, { ids = ABSENT_IDS, headers = {} }: { ids?: Ids, headers?: Record<string, string> } = {}): Promise<Answer> {
  const method = methodOf(route)
  const ifMatch = method === 'PATCH' || method === 'PUT' ? { ifMatch: 1 } : {}
  return client.send(method, pathOf(route, values), route.body?.(ids), { ...ifMatch, headers })
}

const clinic = await makeClinic('routes')
const therapist = await makeTherapist(clinic)
const member = await makeTherapist(clinic)
const patient = await makePatient(therapist)
await therapist.client.post(`/api/patients/${patient.id}/care-team`, { userId: member.id })
const consent = await makeConsent(therapist, patient.id)
const session = await makeSession(therapist, patient.id)
const bout = await makeBout(therapist, session.id)
const { clip } = await makeReadyClip(therapist, session.id)
const still = await pickStill(therapist, clip.id, 5)
const marking = await makeMarking(therapist, still.id, { landmarks: { acromion: { x: 1, y: 1 }, greaterTrochanter: { x: 2, y: 9 } } })
const ids: Ids = { patient: patient.id, user: member.id, consent: consent.id, session: session.id, bout: bout.id, clip: clip.id, still: still.id, marking: marking.id }

const stranger = await makeTherapist(clinic)
const foreigner = await makeTherapist(await makeClinic('routes-elsewhere'))

async function personOf(kind: string): Promise<Person> {
  if (kind === 'therapist') return therapist
  if (kind === 'student') return makeStudent(clinic)
  if (kind === 'patient') return makePatientAccount(clinic, patient.id)
  if (kind === 'administrator') return makeAdministrator(clinic)
  const both = await makeAccount(clinic, ['student', 'administrator'])
  await signIn(both)
  return both
}

/** A fingerprint of everything the clinic holds, but the audit trail, when people were last seen, and pictures kept for speed. */
async function fingerprint(): Promise<Record<string, string>> {
  const marks: Record<string, string> = {}
  for (const table of await listTables()) {
    if (table === 'audit_event' || table === 'sign_in_attempt') continue
    const [row] = await query<{ mark: string }>(
      clinic.id,
      `select count(*) || ' ' || coalesce(md5(string_agg(row, '' order by row)), '') as mark from (select (to_jsonb(t) - 'last_seen_at' - 'image_key')::text as row from ${table} t where ${table === 'clinic' ? 'id' : 'clinic_id'} = $1) as rows`,
      [clinic.id],
    )
    marks[table] = row?.mark ?? ''
  }
  return marks
}

describe('the route files', () => {
  const files = listRouteFiles()

  it('are the routes of the table, no more and no fewer', () => {
    expect(files.flatMap(file => file.route ?? []).sort()).toEqual(ROUTES.map(route => route.route).sort())
    expect(files.filter(file => file.route === null).map(file => file.file)).toEqual(['[...].ts'])
  })

  it.each(files.map(file => [file.file, file] as const))('%s is written with defineApiHandler, says what it needs and what it is', (_name, { text, route }) => {
    expect(text).toMatch(/^export default defineApiHandler\(/m)
    expect(text).not.toMatch(/defineEventHandler|createError|readBody|getUserSession/)
    expect(text.split('\n').length).toBeLessThanOrEqual(30)
    if (route === null) return
    const row = ROUTES.find(({ route: name }) => name === route)
    expect(text).toContain(`can: '${row?.can}'`)
    expect(text).toContain(`/** ${route}.`)
  })

  it('are what the published interface lists', async () => {
    const { paths } = z.object({ paths: z.record(z.string(), z.record(z.string(), z.unknown())) }).parse((await createClient().get('/api/openapi.json')).json)
    const published = Object.entries(paths).flatMap(([path, methods]) => Object.keys(methods).map(method => `${method.toUpperCase()} ${path.replace(/\{(\w+)\}/g, ':$1')}`))
    expect(published.sort()).toEqual(ROUTES.map(route => route.route).sort())
  })

  it('each have a spec of their own: one that names the route, or calls its path', () => {
    const folder = fileURLToPath(new URL('.', import.meta.url))
    const text = readdirSync(folder).filter(name => name.endsWith('.spec.ts') && name !== 'routes.spec.ts').map(name => readFileSync(folder + name, 'utf8')).join('\n')
    const escape = (word: string) => word.replace(/[.*+?^${}()|[\]\\]/g, '\\$&')
    const hasSpec = (route: string) => {
      const called = escape(route.slice(route.indexOf(' ') + 1)).replace(/:\w+/g, '\\$\\{[^}]+\\}')
      return new RegExp(`(${escape(route)}|${called})(?![/\\w.:-])`).test(text)
    }
    expect(ROUTES.map(route => route.route).filter(route => !hasSpec(route))).toEqual([])
  })
})

describe('who may', () => {
  it('is what this list says, written down a second time so that no right is given by the way', () => {
    const rights: Record<Permission, string[]> = {
      'home:read': ['therapist'],
      'patient:read': ['therapist', 'administrator'],
      'patient:write': ['therapist'],
      'care-team:write': ['therapist'],
      'opening:create': ['therapist', 'administrator'],
      'consent:write': ['therapist'],
      'member:read': ['therapist', 'administrator'],
      'session:read': ['therapist', 'administrator'],
      'session:write': ['therapist'],
      'clip:read': ['therapist'],
      'clip:write': ['therapist'],
      'still:write': ['therapist'],
      'marking:read': ['therapist'],
      'marking:write': ['therapist'],
      'measure:compute': ['therapist', 'student'],
      'timeline:read': ['therapist', 'patient', 'administrator'],
      'audit:read': ['administrator'],
    }
    const granted: Record<string, string[]> = {}
    for (const role of ROLES) for (const permission of PERMISSIONS[role]) granted[permission] = [...granted[permission] ?? [], role]
    expect(granted).toEqual(rights)
  })

  it.each(named(guarded))('%s answers 401 to someone who is not signed in, whatever the id', async (_name, route) => {
    for (const values of [idsOf(route, ids), ABSENT, '1']) expectError(await call(route, createClient(), values, { ids }), 401, 'not-signed-in')
  })

  describe.each([['therapist'], ['student'], ['patient'], ['administrator'], ['student and administrator']])('as %s', async (kind) => {
    const person = await personOf(kind)
    it.each(named(guarded))('%s', async (_name, route) => {
      const isHeld = route.can === 'signed-in' || rolesMay(person.roles, z.custom<Permission>(word => typeof word === 'string').parse(route.can))
      if (!isHeld) {
        for (const values of [idsOf(route, ids), ABSENT, '1']) expectError(await call(route, person.client, values, { ids }), 403, 'not-allowed')
      } else if (route.ids) {
        expectError(await call(route, person.client, ABSENT, { ids }), 404, `${route.ids[0]}-not-found`)
      } else {
        expect((await call(route, person.client, [])).status).toBe(route.holder)
      }
    })
  })
})

describe('a record that this person may not see', () => {
  let before: Record<string, string>
  beforeAll(async () => {
    before = await fingerprint()
  })

  it.each(named(withIds))('%s answers someone of another clinic as for an absent one', async (_name, route) => {
    const answers = [await call(route, foreigner.client, idsOf(route, ids), { ids }), await call(route, foreigner.client, ABSENT)]
    for (const answer of answers) expectError(answer, 404, `${route.ids?.[0]}-not-found`)
    expect(answers.map(comparable)[0]).toEqual(answers.map(comparable)[1])
  })

  it.each(named(withIds.filter(route => !route.isForWholeClinic)))('%s answers a therapist of another care team as for an absent one', async (_name, route) => {
    const answers = [await call(route, stranger.client, idsOf(route, ids), { ids }), await call(route, stranger.client, ABSENT)]
    for (const answer of answers) expectError(answer, 404, `${route.ids?.[0]}-not-found`)
    expect(answers.map(comparable)[0]).toEqual(answers.map(comparable)[1])
  })

  it.each(named(withIds))('%s answers a malformed id as an absent one', async (_name, route) => {
    const absent = comparable(await call(route, therapist.client, ABSENT))
    for (const id of MALFORMED) {
      const answer = await call(route, therapist.client, [id, ABSENT])
      expectError(answer, 404, `${route.ids?.[0]}-not-found`)
      expect(comparable(answer), id).toEqual(absent)
    }
  })

  it('and nothing of it was changed by all that', async () => {
    expect(await fingerprint()).toEqual(before)
  })
})

describe('a change from another origin', async () => {
  const own = new URL(stack.baseUrl)
  const cases: [string, Record<string, string>, boolean][] = [
    ['Sec-Fetch-Site: same-origin', { 'sec-fetch-site': 'same-origin' }, true],
    ['Sec-Fetch-Site: none', { 'sec-fetch-site': 'none' }, true],
    ['Sec-Fetch-Site: cross-site', { 'sec-fetch-site': 'cross-site' }, false],
    ['Sec-Fetch-Site: same-site', { 'sec-fetch-site': 'same-site' }, false],
    ['an unknown Sec-Fetch-Site', { 'sec-fetch-site': 'elsewhere' }, false],
    ['Sec-Fetch-Site: cross-site with our Origin', { 'sec-fetch-site': 'cross-site', 'origin': own.origin }, false],
    ['our Origin', { origin: own.origin }, true],
    ['another Origin', { origin: 'https://elsewhere.test' }, false],
    ['Origin: null', { origin: 'null' }, false],
    ['another port', { origin: `http://${own.hostname}:${Number(own.port) + 1}` }, false],
    ['our name as a prefix', { origin: `${own.origin}.elsewhere.test` }, false],
    ['our name before an @', { origin: `${own.origin}@elsewhere.test` }, false],
    ['an Origin that is none', { origin: 'not an origin' }, false],
    ['neither header, as a program sends', {}, true],
  ]

  it.each(named(changing))('%s is refused where it must be, before anything else is asked', async (_name, route) => {
    const anonymous = createClient()
    for (const [what, headers, isOurs] of cases) {
      const answer = await call(route, anonymous, ABSENT, { headers })
      if (isOurs) expect(answer.status, what).not.toBe(403)
      else expectError(answer, 403, 'cross-origin')
    }
  })

  it('has no effect, though the cookie of a person who may is sent along', async () => {
    const before = await fingerprint()
    for (const route of changing) {
      for (const [, headers] of cases.filter(([, , isOurs]) => !isOurs)) expectError(await call(route, therapist.client, idsOf(route, ids), { ids, headers }), 403, 'cross-origin')
    }
    expect(await fingerprint()).toEqual(before)
    expect((await therapist.client.get('/api/me')).status).toBe(200)
  })
})

describe('reading', () => {
  it('changes nothing', async () => {
    const before = await fingerprint()
    const administrator = await makeAdministrator(clinic)
    const accounts = await fingerprint()
    for (const route of reading) {
      const isForAdministrators = route.can === 'audit:read'
      const answer = await call(route, isForAdministrators ? administrator.client : therapist.client, idsOf(route, ids))
      // An upload that is over has no plan any more.
      expect(route.route === 'GET /api/clips/:id/upload' ? [200, 409] : [200], route.route).toContain(answer.status)
    }
    expect(await fingerprint()).toEqual(accounts)
    expect(accounts.patient).toBe(before.patient)
  })

  it('is answered with HEAD by nothing that a person could not GET', async () => {
    for (const route of withIds.filter(({ route: name }) => name.startsWith('GET '))) {
      expect([401, 404, 405]).toContain((await createClient().send('HEAD', pathOf(route, idsOf(route, ids)))).status)
    }
  })
})
