import { afterAll, describe, expect, it } from 'vitest'
import { MeSchema, SignInAnswerSchema } from '#shared/schemas/account'
import { comparable, expectBody, expectError, expectIssueAt } from '../fixtures/api/answers'
import { copyOf, createClient } from '../fixtures/api/client'
import { auditOf, closeDatabase, inTransaction, query } from '../fixtures/api/database'
import { makeAccount, makeClinic, makeTherapist, PASSWORD, signIn, unique } from '../fixtures/api/people'

afterAll(closeDatabase)

const clinic = await makeClinic('auth')
const WRONG = 'not the password'

function attempt(email: string, password: string, client = createClient()) {
  return client.post('/api/auth/sign-in', { email, password })
}

/** Moves all attempts of an address into the past, as waiting would. */
function waitMinutes(email: string, minutes: number) {
  return inTransaction({ setRole: 'standmark_auth' }, client => client.query(
    'update sign_in_attempt set at = at - make_interval(secs => $2) where account = $1', [email.toLowerCase(), minutes * 60],
  ))
}

describe('POST /api/auth/sign-in', () => {
  it('answers the person and sets a cookie that opens GET /api/me', async () => {
    const person = await makeAccount(clinic, ['therapist'], { name: 'Halvard Quist' })
    const answer = await attempt(person.email, PASSWORD, person.client)
    const { user } = expectBody(answer, 200, SignInAnswerSchema)
    expect(user).toEqual({ id: person.id, name: 'Halvard Quist', email: person.email, roles: ['therapist'], clinic: { id: clinic.id, name: clinic.name, timeZone: 'UTC', units: 'metric' } })
    expect(expectBody(await person.client.get('/api/me'), 200, MeSchema)).toEqual(user)
  })

  it('takes the address in any case and with blanks around it', async () => {
    const person = await makeAccount(clinic, ['therapist'])
    expect((await attempt(`  ${person.email.toUpperCase()} `, PASSWORD)).status).toBe(200)
  })

  it('sets a cookie no script can read, for this site only, that holds a seal and ends within twelve hours', async () => {
    const person = await makeAccount(clinic, ['therapist'])
    const answer = await attempt(person.email, PASSWORD)
    const lines = answer.headers.getSetCookie()
    expect(lines).toHaveLength(1)
    const [pair = '', ...attributes] = (lines[0] ?? '').split('; ')
    expect(pair).toMatch(/^standmark=Fe26\.2\*/)
    const names = attributes.map(text => text.toLowerCase())
    expect(names).toEqual(expect.arrayContaining(['httponly', 'samesite=lax', 'path=/']))
    expect(names.some(text => text.startsWith('domain'))).toBe(false)
    const expires = Date.parse(attributes.find(text => /^expires=/i.test(text))?.slice(8) ?? '')
    expect(expires - Date.now()).toBeGreaterThan(0)
    expect(expires - Date.now()).toBeLessThanOrEqual(12 * 3_600_000)
    for (const secret of [person.id, person.email, clinic.id, 'therapist']) expect(decodeURIComponent(pair)).not.toContain(secret)
  })

  it('answers a wrong password, an unknown address and a closed account alike', async () => {
    const known = await makeAccount(clinic, ['therapist'])
    const closed = await makeAccount(clinic, ['therapist'])
    await query(clinic.id, 'update user_account set disabled_at = now() where id = $1', [closed.id])
    const answers = [await attempt(known.email, WRONG), await attempt(`${unique('nobody')}@nowhere.example`, WRONG), await attempt(closed.email, PASSWORD)]
    for (const answer of answers) {
      expectError(answer, 401, 'wrong-credentials')
      expect(answer.headers.getSetCookie()).toEqual([])
    }
    const names = (headers: Headers) => [...headers.keys()].sort()
    expect(new Set(answers.map(answer => JSON.stringify(comparable(answer)))).size).toBe(1)
    expect(new Set(answers.map(answer => JSON.stringify(names(answer.headers)))).size).toBe(1)
  })

  it('names the missing and the unknown fields', async () => {
    const client = createClient()
    expectIssueAt(await client.post('/api/auth/sign-in', { email: 'a@b.example' }), 'password')
    expectIssueAt(await client.post('/api/auth/sign-in', { password: PASSWORD }), 'email')
    expectIssueAt(await client.post('/api/auth/sign-in', { email: 'a@b.example', password: PASSWORD, role: 'administrator' }), '')
    expectIssueAt(await client.post('/api/auth/sign-in', { email: ['a@b.example'], password: PASSWORD }), 'email')
    expectIssueAt(await client.post('/api/auth/sign-in', { email: 'a@b.example', password: 'x'.repeat(513) }), 'password')
  })

  it.each([['a NUL', 'a\u0000@b.example'], ['half of a character pair', 'a\ud800@b.example'], ['a line break', 'a\n@b.example']])('refuses an address with %s', async (_what, email) => {
    expectIssueAt(await attempt(email, PASSWORD), 'email')
  })

  it('writes an audit row for a success and for a failure of a known account', async () => {
    const person = await makeAccount(clinic, ['therapist'])
    const failure = await attempt(person.email, WRONG)
    const success = await attempt(person.email, PASSWORD)
    expect(await auditOf(clinic.id, { requestId: failure.headers.get('x-request-id') ?? '' }))
      .toMatchObject([{ action: 'account.sign-in-failed', actor_id: null, target_type: 'user', target_id: person.id }])
    expect(await auditOf(clinic.id, { requestId: success.headers.get('x-request-id') ?? '' }))
      .toMatchObject([{ action: 'account.sign-in', actor_id: person.id, target_type: 'user', target_id: person.id }])
  })
})

describe('the limit of sign-in attempts', () => {
  it('answers 429 with Retry-After after ten failures, even to the right password', async () => {
    const person = await makeAccount(clinic, ['therapist'])
    for (let failure = 1; failure <= 10; failure++) expectError(await attempt(person.email, WRONG), 401, 'wrong-credentials')
    const limited = await attempt(person.email, PASSWORD)
    expectError(limited, 429, 'too-many-attempts')
    const seconds = Number(limited.headers.get('retry-after'))
    expect(seconds).toBeGreaterThan(0)
    expect(seconds).toBeLessThanOrEqual(15 * 60)
    expectError(await attempt(person.email.toUpperCase(), PASSWORD), 429, 'too-many-attempts')
  })

  it('ends fifteen minutes after the failures', async () => {
    const person = await makeAccount(clinic, ['therapist'])
    for (let failure = 1; failure <= 10; failure++) await attempt(person.email, WRONG)
    await waitMinutes(person.email, 14)
    expectError(await attempt(person.email, PASSWORD), 429, 'too-many-attempts')
    await waitMinutes(person.email, 1.1)
    expect((await attempt(person.email, PASSWORD)).status).toBe(200)
  })

  it('never counts successes, and a success wipes no failure', async () => {
    const person = await makeAccount(clinic, ['therapist'])
    for (let failure = 1; failure <= 9; failure++) await attempt(person.email, WRONG)
    for (let success = 1; success <= 12; success++) expect((await attempt(person.email, PASSWORD)).status).toBe(200)
    expectError(await attempt(person.email, WRONG), 401, 'wrong-credentials')
    expectError(await attempt(person.email, WRONG), 429, 'too-many-attempts')
  })

  it('holds for addresses that nobody has, so that it tells nothing about who exists', async () => {
    const email = `${unique('nobody')}@nowhere.example`
    for (let failure = 1; failure <= 10; failure++) expectError(await attempt(email, WRONG), 401, 'wrong-credentials')
    const limited = await attempt(email, WRONG)
    expectError(limited, 429, 'too-many-attempts')
    expect(limited.headers.get('retry-after')).toMatch(/^\d+$/)
  })

  it('keeps nobody else out', async () => {
    const [locked, other] = [await makeAccount(clinic, ['therapist']), await makeAccount(clinic, ['therapist'])]
    for (let failure = 1; failure <= 11; failure++) await attempt(locked.email, WRONG)
    expect((await attempt(other.email, PASSWORD)).status).toBe(200)
  })

  it('lets ten of thirty parallel guesses through and no more', async () => {
    const person = await makeAccount(clinic, ['therapist'])
    const answers = await Promise.all(Array.from({ length: 30 }, () => attempt(person.email, WRONG)))
    const statuses = answers.map(answer => answer.status)
    expect(statuses.filter(status => status === 401)).toHaveLength(10)
    expect(statuses.filter(status => status === 429)).toHaveLength(20)
  })
})

describe('POST /api/auth/sign-out', () => {
  it('kills the session on the server: the captured cookie opens nothing any more', async () => {
    const person = await makeTherapist(clinic)
    const thief = copyOf(person.client)
    expect((await thief.get('/api/me')).status).toBe(200)
    const answer = await person.client.post('/api/auth/sign-out')
    expect(answer.status).toBe(204)
    expect(answer.text).toBe('')
    expect(answer.headers.get('clear-site-data')).toContain('"storage"')
    expect(person.client.cookies.size).toBe(0)
    expectError(await thief.get('/api/me'), 401, 'not-signed-in')
    expectError(await thief.get('/api/patients'), 401, 'not-signed-in')
  })

  it('leaves the person\'s other sessions alone', async () => {
    const person = await makeTherapist(clinic)
    const other = { ...person, client: createClient() }
    await signIn(other)
    await person.client.post('/api/auth/sign-out')
    expect((await other.client.get('/api/me')).status).toBe(200)
  })

  it('writes an audit row', async () => {
    const person = await makeTherapist(clinic)
    const answer = await person.client.post('/api/auth/sign-out')
    expect(await auditOf(clinic.id, { requestId: answer.headers.get('x-request-id') ?? '' })).toMatchObject([{ action: 'account.sign-out', actor_id: person.id }])
  })

  it('answers 204 to someone who is not signed in', async () => {
    expect((await createClient().post('/api/auth/sign-out')).status).toBe(204)
  })
})

describe('a session', () => {
  const change = (personId: string, set: string) => query(clinic.id, `update sign_in_session set ${set} where user_id = $1`, [personId])

  it('ends after an hour without a request', async () => {
    const person = await makeTherapist(clinic)
    await change(person.id, 'last_seen_at = now() - interval \'59 minutes\'')
    expect((await person.client.get('/api/me')).status).toBe(200)
    await change(person.id, 'last_seen_at = now() - interval \'61 minutes\'')
    expectError(await person.client.get('/api/me'), 401, 'not-signed-in')
  })

  it('is kept alive by requests', async () => {
    const person = await makeTherapist(clinic)
    await change(person.id, 'last_seen_at = now() - interval \'59 minutes\'')
    await person.client.get('/api/me')
    const [row] = await query<{ idle: number }>(clinic.id, 'select extract(epoch from now() - last_seen_at)::float8 as idle from sign_in_session where user_id = $1', [person.id])
    expect(row?.idle).toBeLessThan(60)
  })

  it('ends twelve hours after sign-in, however busy', async () => {
    const person = await makeTherapist(clinic)
    const [row] = await query<{ hours: number }>(clinic.id, 'select extract(epoch from expires_at - created_at)::float8 / 3600 as hours from sign_in_session where user_id = $1', [person.id])
    expect(row?.hours).toBeCloseTo(12, 2)
    await change(person.id, 'expires_at = now() - interval \'1 second\'')
    expectError(await person.client.get('/api/me'), 401, 'not-signed-in')
  })

  it('ends at once when the account is closed', async () => {
    const person = await makeTherapist(clinic)
    await query(clinic.id, 'update user_account set disabled_at = now() where id = $1', [person.id])
    expectError(await person.client.get('/api/me'), 401, 'not-signed-in')
  })

  it('follows a change of roles at the next request', async () => {
    const person = await makeTherapist(clinic)
    expect((await person.client.get('/api/patients')).status).toBe(200)
    await query(clinic.id, 'update user_account set roles = array[\'student\'] where id = $1', [person.id])
    expectError(await person.client.get('/api/patients'), 403, 'not-allowed')
  })

  it('is one of ten: the eleventh sign-in ends the oldest', async () => {
    const person = await makeTherapist(clinic)
    const others = []
    for (let count = 0; count < 10; count++) {
      const client = createClient()
      await attempt(person.email, PASSWORD, client)
      others.push(client)
    }
    expectError(await person.client.get('/api/me'), 401, 'not-signed-in')
    expect(await Promise.all(others.map(async client => (await client.get('/api/me')).status))).toEqual(others.map(() => 200))
  })

  it('keeps only a hash of its token', async () => {
    const person = await makeTherapist(clinic)
    const [row] = await query<{ row: string, length: number }>(clinic.id, 'select s::text as row, octet_length(token_hash) as length from sign_in_session s where user_id = $1', [person.id])
    expect(row?.length).toBe(32)
    expect(row?.row).not.toContain([...person.client.cookies.values()][0])
  })

  it.each([
    ['cut short', (seal: string) => seal.slice(0, -5)],
    ['changed in one character', (seal: string) => seal.replace(/.$/, last => (last === 'A' ? 'B' : 'A'))],
    ['empty', () => ''],
    ['five kilobytes long', (seal: string) => seal + 'A'.repeat(5000)],
    ['not a seal', () => 'eyJzZWN1cmUiOnsidG9rZW4iOiJ4In19'],
  ])('is not opened by a cookie that is %s', async (_what, forge) => {
    const person = await makeTherapist(clinic)
    const [name = '', seal = ''] = [...person.client.cookies][0] ?? []
    expectError(await createClient({ cookies: [[name, forge(seal)]] }).get('/api/me'), 401, 'not-signed-in')
  })

  it('is not opened by a header that carries the seal', async () => {
    const person = await makeTherapist(clinic)
    const seal = decodeURIComponent([...person.client.cookies.values()][0] ?? '')
    for (const name of ['x-standmark-session', 'x-nuxt-session-session', 'authorization']) {
      const value = name === 'authorization' ? `Bearer ${seal}` : seal
      expectError(await createClient().get('/api/me', { headers: { [name]: value } }), 401, 'not-signed-in')
    }
  })
})

describe('a second person in the same browser', () => {
  it('gets a session in which nothing of the first is left, and ends the first one\'s', async () => {
    const first = await makeAccount(clinic, ['therapist', 'administrator'], { name: 'First Person' })
    const second = await makeAccount(clinic, ['student'], { name: 'Second Person' })
    await signIn(first)
    const captured = copyOf(first.client)
    const before = [...first.client.cookies.values()][0]
    const answer = await attempt(second.email, PASSWORD, first.client)
    expect(expectBody(answer, 200, SignInAnswerSchema).user).toEqual({ id: second.id, name: 'Second Person', email: second.email, roles: ['student'], clinic: expect.objectContaining({ id: clinic.id }) })
    expect([...first.client.cookies.values()][0]).not.toBe(before)
    expect((await first.client.get('/api/me')).text).not.toContain('First Person')
    expectError(await first.client.get('/api/audit'), 403, 'not-allowed')
    expectError(await captured.get('/api/me'), 401, 'not-signed-in')
  })

  it('who fails to sign in leaves the first one\'s session as it is', async () => {
    const first = await makeTherapist(clinic)
    expectError(await attempt(`${unique('nobody')}@nowhere.example`, WRONG, first.client), 401, 'wrong-credentials')
    expect(expectBody(await first.client.get('/api/me'), 200, MeSchema).id).toBe(first.id)
  })
})

describe('the session routes of the cookie module', () => {
  it('are not there: they would answer from the cookie alone', async () => {
    const person = await makeTherapist(clinic)
    expectError(await person.client.get('/api/_auth/session'), 404, 'not-found')
    expectError(await person.client.delete('/api/_auth/session'), 404, 'not-found')
    expect((await person.client.get('/api/me')).status).toBe(200)
  })
})
