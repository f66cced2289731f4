import { afterAll, describe, expect, it } from 'vitest'
import { createClient } from '../fixtures/api/client'
import { closeDatabase, inTransaction, query } from '../fixtures/api/database'
import { makeAccount, makeClinic } from '../fixtures/api/people'
import { runServer, startServer } from '../fixtures/api/server'

afterAll(closeDatabase)

const SECRET = 'qN4vT8sY1bL6kW3mZ9cR2xJ7dH5fP0gA'
const PRODUCTION = { STANDMARK_MODE: 'production', STANDMARK_ORIGINS: 'https://standmark.clinic.test', STANDMARK_SECRET: SECRET }

describe('the built server', () => {
  it.each([
    ['without a database', { STANDMARK_DATABASE_URL: undefined }, /STANDMARK_DATABASE_URL is not set/],
    ['with an empty database address', { STANDMARK_DATABASE_URL: ' ' }, /STANDMARK_DATABASE_URL is not set/],
    ['without a secret', { STANDMARK_SECRET: undefined }, /STANDMARK_SECRET is not set/],
    ['with a short secret', { STANDMARK_SECRET: 'short' }, /STANDMARK_SECRET is shorter than 32/],
    ['without storage', { STANDMARK_STORAGE_ENDPOINT: undefined }, /STANDMARK_STORAGE_ENDPOINT is not set/],
    ['with a storage that is no address', { STANDMARK_STORAGE_ENDPOINT: 'storage.internal' }, /STANDMARK_STORAGE_ENDPOINT is not an address/],
    ['without origins', { STANDMARK_ORIGINS: undefined }, /STANDMARK_ORIGINS is not set/],
    ['with an unknown mode', { STANDMARK_MODE: 'test' }, /STANDMARK_MODE is «test»/],
    ['with an unknown role', { STANDMARK_ROLE: 'everything' }, /STANDMARK_ROLE is «everything»/],
    ['in production with a sample secret', { ...PRODUCTION, STANDMARK_SECRET: 'change-me-change-me-change-me-change-me' }, /STANDMARK_SECRET looks like a sample/],
    ['in production with an address without https', { ...PRODUCTION, STANDMARK_ORIGINS: 'https://standmark.clinic.test,http://standmark.clinic.test' }, /production needs https/],
    ['in production without a database', { ...PRODUCTION, STANDMARK_DATABASE_URL: undefined }, /STANDMARK_DATABASE_URL is not set/],
    ['without a mode, which is production, and an address without https', { STANDMARK_MODE: undefined, STANDMARK_SECRET: SECRET }, /production needs https/],
  ])('does not start %s and says so in one line', async (_what, settings, line) => {
    const { code, stdout, stderr } = await runServer(settings)
    expect(code).toBe(78)
    expect(stderr).toMatch(/^Standmark does not start: [^\n]+\n$/)
    expect(stderr).toMatch(line)
    expect(stdout).not.toContain('Listening')
    for (const secret of [SECRET, 'change-me-change']) expect(stderr).not.toContain(secret)
  })

  it('does not start in production on a database that holds the demo clinic', async () => {
    const address = 'therapist@alderbay.example'
    const isThere = await inTransaction({ setRole: 'standmark_auth' }, async client => (await client.query('select id from user_account where lower(email) = $1', [address])).rowCount === 1)
    const clinic = await makeClinic('start')
    const person = isThere ? null : await makeAccount(clinic, ['therapist'], { email: address })
    try {
      const { code, stderr } = await runServer(PRODUCTION)
      expect(stderr).toMatch(/^Standmark does not start: the database holds the demo clinic[^\n]*\n$/)
      expect(code).toBe(78)
    } finally {
      if (person) await query(clinic.id, 'delete from user_account where id = $1', [person.id])
    }
  })

  it('starts in production while the database is still away, says so in its health, and sets cookies for https alone', async () => {
    const server = await startServer({ ...PRODUCTION, STANDMARK_DATABASE_URL: 'postgres://standmark_app:x@127.0.0.1:9/standmark' })
    try {
      const client = createClient({ baseUrl: server.baseUrl })
      expect((await client.get('/api/health')).status).toBe(503)
      const answer = await client.post('/api/auth/sign-out')
      const [line = ''] = answer.headers.getSetCookie()
      expect(line).toMatch(/^__Host-standmark=/)
      expect(line).toMatch(/; Secure/i)
      expect(line).toMatch(/; HttpOnly/i)
      expect(line).toMatch(/; Path=\/(;|$)/i)
      expect(line).not.toMatch(/; Domain/i)
      expect(answer.headers.get('strict-transport-security')).toMatch(/max-age=31536000/)
    } finally {
      await server.stop()
    }
  })

  it('serves nothing but its health as a worker', async () => {
    const server = await startServer({ STANDMARK_ROLE: 'worker' })
    try {
      const client = createClient({ baseUrl: server.baseUrl })
      expect((await client.get('/api/health')).status).toBe(200)
      for (const path of ['/api/me', '/api/patients', '/api/openapi.json', '/']) expect((await client.get(path)).status, path).toBe(503)
    } finally {
      await server.stop()
    }
  })

  it('ends cleanly on SIGTERM', async () => {
    const server = await startServer()
    await server.stop()
    expect(server.output.stderr).toBe('')
  })
})
