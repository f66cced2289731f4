import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { applyCommand, invertCommand } from '~/marking/commands/marking-command'
import type { MarkingCommand } from '~/marking/commands/marking-command'
import { moveLandmark } from '~/marking/commands/move-landmark'
import { movePlumbLineEnd } from '~/marking/commands/move-plumb-line-end'
import { moveScaleEnd } from '~/marking/commands/move-scale-end'
import { placeLandmark } from '~/marking/commands/place-landmark'
import { removeLandmark } from '~/marking/commands/remove-landmark'
import { replaceDocument } from '~/marking/commands/replace-document'
import { setFacing, setFlag, setSide } from '~/marking/commands/set-circumstance'
import { setNotVisible } from '~/marking/commands/set-not-visible'
import { setPlumbLine } from '~/marking/commands/set-plumb-line'
import { setScale } from '~/marking/commands/set-scale'
import type { MarkingDocument } from '~/marking/document'
import { documents, landmark, NAMES, plumbLine, point, scale, side } from '../arbitrary-document'

const name = fc.constantFrom(...NAMES)

/** Every kind of command, made for a document as the bench makes it; null when it would change nothing. */
const MAKERS: Record<MarkingCommand['type'], (document: MarkingDocument) => fc.Arbitrary<MarkingCommand | null>> = {
  'landmark.place': document => fc.tuple(name, landmark).map(([id, at]) => document.landmarks[id] ? null : placeLandmark(document, id, at)),
  'landmark.move': document => fc.tuple(name, point).map(([id, at]) => moveLandmark(document, id, at)),
  'landmark.remove': document => name.map(id => removeLandmark(document, id)),
  'landmark.set-not-visible': document => fc.tuple(name, fc.option(fc.constantFrom('clothing', 'blurred'))).map(([id, reason]) => setNotVisible(document, id, reason)),
  'plumb-line.set': document => fc.option(plumbLine).map(line => setPlumbLine(document, line)),
  'plumb-line.move-end': document => fc.tuple(fc.constantFrom('top', 'bottom'), point).map(([end, at]) => movePlumbLineEnd(document, end, at)),
  'scale.set': document => fc.option(scale).map(line => setScale(document, line)),
  'scale.move-end': document => fc.tuple(fc.constantFrom('from', 'to'), point).map(([end, at]) => moveScaleEnd(document, end, at)),
  'circumstance.set': document => fc.oneof(
    side.map(value => setFacing(document, value)),
    side.map(value => setSide(document, value)),
    fc.tuple(fc.constantFrom('mirrored', 'clothed', 'supported'), fc.boolean()).map(([flag, on]) => setFlag(document, flag, on)),
  ),
  'document.replace': document => documents.map(other => replaceDocument(document, other)),
}

describe('invertCommand', () => {
  for (const [type, make] of Object.entries(MAKERS)) {
    it(`takes ${type} back to the very document`, () => {
      fc.assert(fc.property(documents.chain(document => fc.tuple(fc.constant(document), make(document))), ([document, command]) => {
        fc.pre(command !== null)
        const before = structuredClone(document)
        const after = applyCommand(document, command)
        expect(document).toEqual(before)
        expect(applyCommand(after, invertCommand(command))).toEqual(document)
        expect(applyCommand(applyCommand(after, invertCommand(command)), command)).toEqual(after)
      }), { numRuns: 200 })
    })
  }

  it('keeps a landmark in one state only, whatever the order of commands', () => {
    const anyMaker = fc.constantFrom(...Object.values(MAKERS))
    fc.assert(fc.property(documents, fc.array(anyMaker.chain(make => fc.constant(make)), { maxLength: 12 }), fc.gen(), (start, makers, gen) => {
      let document = start
      for (const make of makers) {
        const command = gen(() => make(document))
        if (command) document = applyCommand(document, command)
        const both = Object.keys(document.landmarks).filter(id => document.notVisible[id] !== undefined)
        expect(both).toEqual([])
      }
    }), { numRuns: 100 })
  })
})
