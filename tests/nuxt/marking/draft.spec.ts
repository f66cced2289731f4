import { beforeEach, describe, expect, it } from 'vitest'
import { clearMarkingDrafts, useMarkingDraft } from '~/composables/useMarkingDraft'
import { placeLandmark } from '~/marking/commands/place-landmark'
import { EMPTY_DOCUMENT } from '~/marking/document'
import { createHistory } from '~/marking/history'
import { useMarkingStore } from '~/stores/useMarkingStore'
import { useSessionStore } from '~/stores/useSessionStore'

const USER = { id: 'user-a', name: 'A', email: 'a@example.org', roles: ['therapist' as const], clinic: { id: 'c', name: 'C', timeZone: 'UTC', units: 'metric' as const } }

function begin(stillId = 'still-1') {
  const store = useMarkingStore()
  store.put({ stillId, history: createHistory(EMPTY_DOCUMENT, 10), base: null, savedDocument: EMPTY_DOCUMENT, place: { upTo: 'core', skipped: [] }, keptAt: null })
  return store
}
function keepNow(stillId = 'still-1') {
  const marking = useMarkingStore().markingOf(stillId)
  return marking !== null && useMarkingDraft().keep(marking)
}

describe('useMarkingDraft', () => {
  beforeEach(() => {
    sessionStorage.clear()
    useMarkingStore().forget()
    useSessionStore().enter(USER)
  })

  it('keeps an unsaved marking with its undo and gives it back', () => {
    const store = begin()
    store.run('still-1', placeLandmark(EMPTY_DOCUMENT, 'heel', { x: 1, y: 2 }))
    expect(keepNow()).toBe(true)
    expect(store.markingOf('still-1')?.keptAt).not.toBeNull()
    expect(useMarkingDraft().restore('still-1')?.history).toEqual(store.markingOf('still-1')?.history)
  })

  it('keeps coordinates and ids alone', () => {
    begin().run('still-1', placeLandmark(EMPTY_DOCUMENT, 'heel', { x: 1, y: 2 }))
    keepNow()
    const text = Object.values(sessionStorage).join()
    expect(text).not.toContain(USER.email)
    expect(text).toContain('heel')
  })

  it('takes the draft away once nothing is unsaved', () => {
    const store = begin()
    store.run('still-1', placeLandmark(EMPTY_DOCUMENT, 'heel', { x: 1, y: 2 }))
    keepNow()
    store.undo('still-1')
    keepNow()
    expect(useMarkingDraft().has('still-1')).toBe(false)
    expect(sessionStorage).toHaveLength(0)
  })

  it('gives nothing to the next person at the computer', () => {
    begin().run('still-1', placeLandmark(EMPTY_DOCUMENT, 'heel', { x: 1, y: 2 }))
    keepNow()
    useSessionStore().enter({ ...USER, id: 'user-b' })
    expect(useMarkingDraft().has('still-1')).toBe(false)
    expect(useMarkingStore().markingOf('still-1')).toBeNull()
    expect(sessionStorage).toHaveLength(0)
  })

  it('clears drafts alone', () => {
    begin().run('still-1', placeLandmark(EMPTY_DOCUMENT, 'heel', { x: 1, y: 2 }))
    keepNow()
    sessionStorage.setItem('theme', 'dark')
    clearMarkingDrafts()
    expect(Object.keys(sessionStorage)).toEqual(['theme'])
  })
})

describe('useMarkingStore', () => {
  it('is not dirty after undoing everything, and is after a redo', () => {
    const store = begin('still-2')
    store.run('still-2', placeLandmark(EMPTY_DOCUMENT, 'heel', { x: 1, y: 2 }))
    expect(store.isDirty('still-2')).toBe(true)
    store.undo('still-2')
    expect(store.isDirty('still-2')).toBe(false)
    store.redo('still-2')
    expect(store.dirtyIds()).toContain('still-2')
  })
})
