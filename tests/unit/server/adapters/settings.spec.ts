import { describe, expect, it } from 'vitest'
import { readSettings, SettingsError } from '#server/adapters/settings'

const SECRET = 'qN4vT8sY1bL6kW3mZ9cR2xJ7dH5fP0gA'
const PRODUCTION = {
  STANDMARK_DATABASE_URL: 'postgres://standmark_app:x@db.internal/standmark',
  STANDMARK_SECRET: SECRET,
  STANDMARK_ORIGINS: 'https://standmark.clinic.test',
  STANDMARK_STORAGE_ENDPOINT: 'https://storage.internal',
  STANDMARK_STORAGE_BUCKET: 'clips',
  STANDMARK_STORAGE_KEY: 'key',
  STANDMARK_STORAGE_SECRET: 'storage-secret',
}
const DEMO = { ...PRODUCTION, STANDMARK_MODE: 'demo', STANDMARK_ORIGINS: 'http://localhost:3000,http://127.0.0.1:3000' }

/** The one line that a wrong environment is answered with. */
function complaintOf(env: Record<string, string | undefined>): string {
  try {
    readSettings(env)
  } catch (error) {
    expect(error).toBeInstanceOf(SettingsError)
    return error instanceof Error ? error.message : ''
  }
  return 'no complaint'
}

describe('readSettings', () => {
  it('takes production for granted, and both roles', () => {
    expect(readSettings(PRODUCTION)).toMatchObject({ mode: 'production', role: 'all', origins: ['https://standmark.clinic.test'], secret: SECRET })
  })

  it('fills what may be left out', () => {
    expect(readSettings(PRODUCTION)).toMatchObject({
      storage: { endpoint: 'https://storage.internal', publicEndpoint: 'https://storage.internal', region: 'us-east-1', bucket: 'clips', key: 'key', secret: 'storage-secret' },
      smtpUrl: null, ffmpeg: 'ffmpeg', ffprobe: 'ffprobe',
    })
  })

  it('takes several origins, trims them and drops a slash at their end', () => {
    expect(readSettings({ ...PRODUCTION, STANDMARK_ORIGINS: ' https://a.test/ , https://b.test:8443,' }).origins).toEqual(['https://a.test', 'https://b.test:8443'])
  })

  it('lets the demo run on plain http', () => {
    expect(readSettings(DEMO)).toMatchObject({ mode: 'demo', origins: ['http://localhost:3000', 'http://127.0.0.1:3000'] })
  })

  it.each(Object.keys(PRODUCTION))('names %s when it is missing or blank', (name) => {
    for (const value of [undefined, '', '   ']) expect(complaintOf({ ...PRODUCTION, [name]: value })).toMatch(new RegExp(`^${name} is not set: .+`))
  })

  it.each([
    ['change-me-change-me-change-me-change-me'], ['secretsecretsecretsecretsecretsecret'], ['an-example-secret-of-forty-characters-xx'], ['standmark-demo-secret-000000000000000000'],
    ['MyPasswordMyPasswordMyPasswordMyPassword'], ['a'.repeat(40)],
  ])('refuses the sample secret %s in production', (secret) => {
    expect(complaintOf({ ...PRODUCTION, STANDMARK_SECRET: secret })).toMatch(/looks like a sample/)
    expect(complaintOf({ ...PRODUCTION, STANDMARK_SECRET: secret })).not.toContain(secret)
  })

  it('refuses a secret under 32 characters in every mode, without showing it', () => {
    for (const env of [PRODUCTION, DEMO]) {
      const complaint = complaintOf({ ...env, STANDMARK_SECRET: SECRET.slice(1) })
      expect(complaint).toMatch(/shorter than 32/)
      expect(complaint).not.toContain(SECRET.slice(1))
    }
  })

  it('refuses http origins in production, also one among several', () => {
    expect(complaintOf({ ...PRODUCTION, STANDMARK_ORIGINS: 'http://standmark.clinic.test' })).toMatch(/production needs https/)
    expect(complaintOf({ ...PRODUCTION, STANDMARK_ORIGINS: 'https://a.test,http://localhost:3000' })).toMatch(/«http:\/\/localhost:3000»: production needs https/)
  })

  it.each([['standmark.clinic.test'], ['https://standmark.clinic.test/path'], ['https://a.test?x=1'], ['*'], ['https://user@a.test']])('refuses %s, which is no origin', (origin) => {
    expect(complaintOf({ ...PRODUCTION, STANDMARK_ORIGINS: origin })).toMatch(/is not an origin/)
  })

  it('refuses a list of origins with nothing in it', () => {
    expect(complaintOf({ ...PRODUCTION, STANDMARK_ORIGINS: ' , ' })).toMatch(/^STANDMARK_ORIGINS/)
  })

  it.each([
    ['STANDMARK_DATABASE_URL', 'db.internal'], ['STANDMARK_DATABASE_URL', 'mysql://standmark:hush@db/standmark'], ['STANDMARK_STORAGE_ENDPOINT', 'storage.internal'], ['STANDMARK_STORAGE_PUBLIC_ENDPOINT', 'ftp://storage'],
    ['STANDMARK_SMTP_URL', 'mail:hush@mail.internal'],
  ])('refuses %s when it is no address of its kind, without showing it', (name, value) => {
    const complaint = complaintOf({ ...PRODUCTION, [name]: value })
    expect(complaint).toMatch(new RegExp(`^${name} is not an address that begins with `))
    expect(complaint).not.toContain('hush')
  })

  it('refuses words it does not know for mode and role', () => {
    expect(complaintOf({ ...PRODUCTION, STANDMARK_MODE: 'prod' })).toBe('STANDMARK_MODE is «prod»: it must be one of production, demo')
    expect(complaintOf({ ...PRODUCTION, STANDMARK_ROLE: 'server' })).toBe('STANDMARK_ROLE is «server»: it must be one of all, web, worker')
  })

  it('says everything in one line', () => {
    for (const env of [{}, { ...PRODUCTION, STANDMARK_MODE: 'x' }, { ...PRODUCTION, STANDMARK_ORIGINS: 'x' }]) expect(complaintOf(env)).not.toContain('\n')
  })
})
