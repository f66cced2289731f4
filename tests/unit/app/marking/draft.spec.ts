import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { moveLandmark } from '~/marking/commands/move-landmark'
import { placeLandmark } from '~/marking/commands/place-landmark'
import { replaceDocument } from '~/marking/commands/replace-document'
import { setFacing, setFlag } from '~/marking/commands/set-circumstance'
import { setNotVisible } from '~/marking/commands/set-not-visible'
import { setPlumbLine } from '~/marking/commands/set-plumb-line'
import { setScale } from '~/marking/commands/set-scale'
import { moveScaleEnd } from '~/marking/commands/move-scale-end'
import { movePlumbLineEnd } from '~/marking/commands/move-plumb-line-end'
import { removeLandmark } from '~/marking/commands/remove-landmark'
import type { MarkingCommand } from '~/marking/commands/marking-command'
import { EMPTY_DOCUMENT } from '~/marking/document'
import type { MarkingDocument } from '~/marking/document'
import { draftKey, isDraftKey, readDraft, writeDraft } from '~/marking/draft'
import { createHistory, execute, undo } from '~/marking/history'
import { documents } from './arbitrary-document'

const OWNER = { userId: 'user-a', stillId: 'still-1' }
const ORIGIN = { ...OWNER, base: { markingId: 'marking-1', version: 2 }, keptAt: 1_700_000_000_000 }

/** One of each kind of command, undone once, so that past and future are both filled. */
function longHistory() {
  const steps: readonly ((document: MarkingDocument) => MarkingCommand | null)[] = [
    document => placeLandmark(document, 'heel', { x: 1, y: 2, sd: 3 }),
    document => moveLandmark(document, 'heel', { x: 2, y: 2 }),
    document => setNotVisible(document, 'tragus', 'clothing'),
    document => setPlumbLine(document, { top: { x: 1, y: 1 }, bottom: { x: 1, y: 900 } }),
    document => movePlumbLineEnd(document, 'top', { x: 2, y: 1 }),
    document => setScale(document, { from: { x: 1, y: 1 }, to: { x: 1, y: 500 }, lengthMm: 1000 }),
    document => moveScaleEnd(document, 'to', { x: 2, y: 501 }),
    document => setFacing(document, 'right'),
    document => setFlag(document, 'clothed', true),
    document => removeLandmark(document, 'heel'),
    document => replaceDocument(document, EMPTY_DOCUMENT),
  ]
  let history = createHistory(EMPTY_DOCUMENT, 50)
  for (const step of steps) {
    const command = step(history.document)
    if (!command) throw new Error('every step of this history is a command')
    history = execute(history, command)
  }
  return undo(history)
}

describe('readDraft', () => {
  it('brings back the document with all that can be undone and redone', () => {
    const history = longHistory()
    expect(readDraft(writeDraft(ORIGIN, history), OWNER)).toEqual({ format: 1, ...ORIGIN, history })
  })
  it('brings back any document', () => {
    fc.assert(fc.property(documents, (document) => {
      expect(readDraft(writeDraft(ORIGIN, createHistory(document, 10)), OWNER)?.history.document).toEqual(document)
    }))
  })
  it('gives a draft to nobody but its owner and for no other still', () => {
    const text = writeDraft(ORIGIN, createHistory(EMPTY_DOCUMENT, 10))
    expect(readDraft(text, { ...OWNER, userId: 'user-b' })).toBeNull()
    expect(readDraft(text, { ...OWNER, stillId: 'still-2' })).toBeNull()
  })
  it('takes what is no draft for none', () => {
    for (const text of ['', 'null', '{', '{"format":2}', '[]', writeDraft(ORIGIN, createHistory(EMPTY_DOCUMENT, 10)).replace('"format":1', '"format":9')]) {
      expect(readDraft(text, OWNER), text).toBeNull()
    }
  })
})

describe('draftKey', () => {
  it('tells drafts from other keys and one person from another', () => {
    expect(isDraftKey(draftKey('user-a', 'still-1'))).toBe(true)
    expect(isDraftKey(draftKey('user-a', 'still-1'), 'user-a')).toBe(true)
    expect(isDraftKey(draftKey('user-a', 'still-1'), 'user-b')).toBe(false)
    expect(isDraftKey('theme')).toBe(false)
  })
})
