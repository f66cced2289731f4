import { describe, expect, it } from 'vitest'
import { mayAnswerRange, readRange } from '#server/services/byte-range'

// RFC 9110, sections 13.1.5 and 14: the examples of 14.1.2 with a body of 10 000 bytes, and the edges.
describe('readRange', () => {
  it.each<[string | undefined, { start: number, end: number } | null]>([
    ['bytes=0-499', { start: 0, end: 499 }],
    ['bytes=500-999', { start: 500, end: 999 }],
    ['bytes=-500', { start: 9500, end: 9999 }],
    ['bytes=9500-', { start: 9500, end: 9999 }],
    ['bytes=0-', { start: 0, end: 9999 }],
    ['bytes=0-0', { start: 0, end: 0 }],
    ['bytes=-1', { start: 9999, end: 9999 }],
    ['bytes=9999-20000', { start: 9999, end: 9999 }],
    ['bytes=-20000', { start: 0, end: 9999 }],
    ['bytes=0-0,-1', null],
    ['bytes=500-600,601-999', null],
    ['bytes=5-2', null],
    ['bytes=-', null],
    ['bytes=a-b', null],
    ['seconds=0-5', null],
    [undefined, null],
  ])('reads %s', (header, range) => {
    expect(readRange(header, 10_000)).toEqual(range)
  })

  it.each([['bytes=10000-'], ['bytes=10000-10001'], ['bytes=99999-'], ['bytes=-0']])('has no answer for %s', (header) => {
    expect(() => readRange(header, 10_000)).toThrow(RangeError)
  })
})

describe('mayAnswerRange', () => {
  it('compares If-Range with the tag, and takes a date for a stale one', () => {
    expect([undefined, '"a"', '"b"', 'W/"a"', 'Tue, 01 Dec 2026 05:00:00 GMT'].map(header => mayAnswerRange(header, '"a"'))).toEqual([true, true, false, false, false])
  })
})
