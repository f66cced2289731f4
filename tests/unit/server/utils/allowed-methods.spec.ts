import { describe, expect, it } from 'vitest'
import { allowedMethods } from '#server/utils/allowed-methods'

const ROUTES = [
  { route: '/api/patients', method: 'get' },
  { route: '/api/patients', method: 'post' },
  { route: '/api/patients/:id', method: 'patch' },
  { route: '/api/patients/:id/care-team/:userId', method: 'delete' },
  { route: '/api/**' },
  { route: '/**' },
  { method: 'get' },
]

describe('allowedMethods', () => {
  it('lists the methods of an address, in capitals and in order', () => {
    expect(allowedMethods('/api/patients', ROUTES)).toEqual(['GET', 'POST'])
  })
  it('lets a parameter stand for one segment and no more', () => {
    expect(allowedMethods('/api/patients/1', ROUTES)).toEqual(['PATCH'])
    expect(allowedMethods('/api/patients/1/care-team/2', ROUTES)).toEqual(['DELETE'])
    expect(allowedMethods('/api/patients/1/care-team', ROUTES)).toEqual([])
  })
  it('looks past the query and a slash at the end', () => {
    expect(allowedMethods('/api/patients/?search=/api/x', ROUTES)).toEqual(['GET', 'POST'])
  })
  it('finds nothing at an unknown address, also where a catch-all would answer', () => {
    expect(allowedMethods('/api/nothing', ROUTES)).toEqual([])
    expect(allowedMethods('/', ROUTES)).toEqual([])
  })
})
