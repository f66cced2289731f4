import { describe, expect, it } from 'vitest'
import { toSafeError } from '#server/adapters/logger'

/** An error as the database driver throws it: its texts quote what it was given. */
function databaseError(fields: Record<string, unknown> = {}): Error {
  return Object.assign(new Error('duplicate key value violates unique constraint "patient_record_number": Quentin'), {
    severity: 'ERROR', code: '23505', constraint: 'patient_record_number', detail: 'Key (name)=(Quentin) already exists.', routine: '_bt_check_unique', ...fields,
  })
}

describe('toSafeError', () => {
  it('keeps code, constraint and routine of a database error and none of its texts', () => {
    const safe = toSafeError(databaseError())
    expect(safe).toMatchObject({ type: 'Error', code: '23505', constraint: 'patient_record_number', message: 'database: _bt_check_unique' })
    expect(JSON.stringify(safe)).not.toContain('Quentin')
  })

  it('keeps neither statement nor parameters of a query error, also where it is the cause', () => {
    const query = Object.assign(new Error('Failed query: insert into patient values ($1)\nparams: Quentin'), { query: 'insert into patient', params: ['Quentin'] })
    query.cause = databaseError()
    const safe = toSafeError(new Error('outer', { cause: query }))
    expect(safe).toMatchObject({ message: 'outer', cause: { message: 'database: query failed', cause: { code: '23505' } } })
    expect(JSON.stringify(safe)).not.toContain('Quentin')
    expect(JSON.stringify(safe)).not.toContain('insert into')
  })

  it('keeps the places in the code, and not the first line of the stack, which repeats the text', () => {
    const safe = toSafeError(databaseError())
    expect(safe.stack.length).toBeGreaterThan(0)
    expect(safe.stack.length).toBeLessThanOrEqual(12)
    for (const line of safe.stack) expect(line).toMatch(/^at /)
  })

  it('shortens long texts', () => {
    expect(toSafeError(new Error('x'.repeat(5000))).message).toHaveLength(300)
  })

  it.each([['Quentin'], [42], [null], [undefined], [{ name: 'Quentin' }]])('tells nothing of %s, which is no Error', (thrown) => {
    expect(toSafeError(thrown)).toEqual({ type: typeof thrown, message: 'not an Error', stack: [] })
  })
})
