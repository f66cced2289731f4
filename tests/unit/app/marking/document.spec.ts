import { describe, expect, it } from 'vitest'
import { EMPTY_DOCUMENT, isDocumentEmpty, isSameDocument, landmarkState, withLandmarkState } from '~/marking/document'

describe('withLandmarkState', () => {
  it('leaves every landmark in one state', () => {
    const hidden = withLandmarkState(EMPTY_DOCUMENT, 'heel', { kind: 'not-visible', reason: 'support' })
    expect(landmarkState(hidden, 'heel')).toEqual({ kind: 'not-visible', reason: 'support' })
    const marked = withLandmarkState(hidden, 'heel', { kind: 'marked', point: { x: 1, y: 2 } })
    expect(marked).toEqual({ ...EMPTY_DOCUMENT, landmarks: { heel: { x: 1, y: 2 } } })
    expect(withLandmarkState(marked, 'heel', null)).toEqual(EMPTY_DOCUMENT)
  })
})

describe('isSameDocument', () => {
  const ab = { ...EMPTY_DOCUMENT, landmarks: { a: { x: 1, y: 1 }, b: { x: 2, y: 2 } } }
  it('does not mind the order of marking', () => {
    expect(isSameDocument(ab, { ...EMPTY_DOCUMENT, landmarks: { b: { x: 2, y: 2 }, a: { x: 1, y: 1 } } })).toBe(true)
  })
  it('does not mind the order in which a database keeps the parts', () => {
    const scale = { from: { x: 1, y: 2 }, to: { x: 3, y: 4 }, lengthMm: 1000 }
    const kept = { to: { y: 4, x: 3 }, from: { x: 1, y: 2 }, lengthMm: 1000 }
    expect(isSameDocument({ ...ab, scale }, { ...ab, scale: kept })).toBe(true)
  })
  it('sees any difference', () => {
    expect(isSameDocument(ab, { ...ab, clothed: true })).toBe(false)
    expect(isSameDocument(ab, { ...ab, landmarks: { a: { x: 1, y: 1 }, b: { x: 2, y: 2.1 } } })).toBe(false)
    expect(isSameDocument(ab, { ...ab, notVisible: { c: 'support' } })).toBe(false)
  })
})

describe('isDocumentEmpty', () => {
  it('counts marks, not circumstances', () => {
    expect(isDocumentEmpty({ ...EMPTY_DOCUMENT, facing: 'left', clothed: true })).toBe(true)
    expect(isDocumentEmpty({ ...EMPTY_DOCUMENT, notVisible: { heel: 'support' } })).toBe(false)
    expect(isDocumentEmpty({ ...EMPTY_DOCUMENT, scale: { from: { x: 0, y: 0 }, to: { x: 0, y: 9 }, lengthMm: 1000 } })).toBe(false)
  })
})
