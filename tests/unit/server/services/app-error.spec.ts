import { describe, expect, it } from 'vitest'
import { AppError, isDatabaseAway, listErrors, violatedConstraint } from '#server/services/app-error'

function withCode(code: string, message = 'text', more: Record<string, unknown> = {}): Error {
  return Object.assign(new Error(message), { code, ...more })
}

describe('the table of errors', () => {
  it('has stable kebab-case words and a sentence each', () => {
    for (const { code, message } of listErrors()) {
      expect(code).toMatch(/^[a-z]+(-[a-z]+)*$/)
      expect(message).toMatch(/^[A-Z][^\n]{5,118}[^.]$/)
    }
  })

  it('gives every «not found» a 404 and nothing else one', () => {
    for (const { code, status } of listErrors()) expect(status === 404, code).toBe(code.endsWith('not-found'))
  })

  it('holds the codes that other programs rely on, with their status', () => {
    const statuses = Object.fromEntries(listErrors().map(({ code, status }) => [code, status]))
    expect(statuses).toMatchObject({
      'validation-failed': 400, 'facing-required': 400, 'plumb-line-too-short': 400, 'landmarks-coincide': 400, 'not-signed-in': 401, 'wrong-credentials': 401, 'not-allowed': 403, 'cross-origin': 403,
      'no-recording-consent': 409, 'stale-version': 412, 'body-too-large': 413, 'idempotency-mismatch': 422, 'version-required': 428, 'internal': 500, 'database-unavailable': 503, 'storage-unavailable': 503,
    })
  })

  it('is what an AppError says', () => {
    const cause = new Error('inner')
    const error = new AppError('stale-version', { current: { version: 2 }, cause })
    expect({ status: error.statusCode, message: error.message, code: error.code, cause: error.cause }).toEqual({ status: 412, message: 'Someone saved a newer version', code: 'stale-version', cause })
  })
})

describe('isDatabaseAway', () => {
  it.each(['ECONNREFUSED', 'ECONNRESET', 'ETIMEDOUT', 'ENOTFOUND', 'EPIPE', '57P01', '57P02', '57P03', '53300', '08006'])('is true for the code %s, also deep in the causes', (code) => {
    expect(isDatabaseAway(withCode(code))).toBe(true)
    expect(isDatabaseAway(new Error('outer', { cause: new Error('middle', { cause: withCode(code) }) }))).toBe(true)
  })

  it.each(['timeout exceeded when trying to connect', 'Connection terminated unexpectedly', 'Connection terminated due to connection timeout', 'Query read timeout'])('is true for the driver\'s words «%s»', (message) => {
    expect(isDatabaseAway(new Error(message))).toBe(true)
  })

  it.each(['23505', '42501', '22P02', '40001', 'P0001'])('is false for the code %s: the statement was wrong, not the connection', (code) => {
    expect(isDatabaseAway(withCode(code))).toBe(false)
  })

  it('is false for what is no error', () => {
    expect([isDatabaseAway(null), isDatabaseAway('ECONNREFUSED'), isDatabaseAway({ code: 'ECONNREFUSED' })]).toEqual([false, false, false])
  })
})

describe('violatedConstraint', () => {
  it('names the constraint of an integrity violation, also deep in the causes', () => {
    const violation = withCode('23P01', 'conflicting', { constraint: 'bout_no_overlap' })
    expect(violatedConstraint(violation)).toBe('bout_no_overlap')
    expect(violatedConstraint(new Error('Failed query', { cause: violation }))).toBe('bout_no_overlap')
  })

  it('names none for other errors', () => {
    expect([violatedConstraint(withCode('42501', 'x', { constraint: 'y' })), violatedConstraint(new Error('x')), violatedConstraint(undefined)]).toEqual([undefined, undefined, undefined])
  })
})
