import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { placeLandmark } from '~/marking/commands/place-landmark'
import { EMPTY_DOCUMENT } from '~/marking/document'
import { canRedo, canUndo, createHistory, execute, redo, undo } from '~/marking/history'
import type { MarkingHistory } from '~/marking/history'

function place(history: MarkingHistory, name: string, x = 1): MarkingHistory {
  return execute(history, placeLandmark(history.document, name, { x, y: 1 }))
}

describe('history', () => {
  const empty = createHistory(EMPTY_DOCUMENT, 100)

  it('has nothing to undo or redo at first', () => {
    expect([canUndo(empty), canRedo(empty)]).toEqual([false, false])
    expect(undo(empty)).toBe(empty)
    expect(redo(empty)).toBe(empty)
  })

  it('undoes and redoes command by command', () => {
    const two = place(place(empty, 'heel'), 'c7')
    const one = undo(two)
    expect(Object.keys(one.document.landmarks)).toEqual(['heel'])
    expect(undo(one).document).toEqual(EMPTY_DOCUMENT)
    expect(redo(one).document).toEqual(two.document)
  })

  it('forgets what could be redone when something new is done', () => {
    const branched = place(undo(place(empty, 'heel')), 'c7')
    expect(canRedo(branched)).toBe(false)
    expect(Object.keys(branched.document.landmarks)).toEqual(['c7'])
  })

  it('forgets the oldest command beyond its capacity and keeps the document', () => {
    let history = createHistory(EMPTY_DOCUMENT, 2)
    for (const name of ['heel', 'c7', 'tragus']) history = place(history, name)
    expect(history.past).toHaveLength(2)
    expect(Object.keys(undo(undo(history)).document.landmarks)).toEqual(['heel'])
  })

  it('refuses a capacity that holds nothing', () => {
    expect(() => createHistory(EMPTY_DOCUMENT, 0)).toThrow(RangeError)
    expect(() => createHistory(EMPTY_DOCUMENT, 1.5)).toThrow(RangeError)
  })

  it('comes back to the start by undoing everything and to the end by redoing everything', () => {
    fc.assert(fc.property(fc.array(fc.tuple(fc.constantFrom('heel', 'c7', 'tragus'), fc.integer())), (steps) => {
      let history = empty
      for (const [name, x] of steps) history = place(history, name, x)
      const end = history.document
      while (canUndo(history)) history = undo(history)
      expect(history.document).toEqual(EMPTY_DOCUMENT)
      while (canRedo(history)) history = redo(history)
      expect(history.document).toEqual(end)
    }))
  })
})
