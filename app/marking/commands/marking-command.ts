import type { MarkingDocument } from '../document'
import { applyMoveLandmark, invertMoveLandmark } from './move-landmark'
import type { MoveLandmark } from './move-landmark'
import { applyMovePlumbLineEnd, invertMovePlumbLineEnd } from './move-plumb-line-end'
import type { MovePlumbLineEnd } from './move-plumb-line-end'
import { applyMoveScaleEnd, invertMoveScaleEnd } from './move-scale-end'
import type { MoveScaleEnd } from './move-scale-end'
import { applyPlaceLandmark, invertPlaceLandmark } from './place-landmark'
import type { PlaceLandmark } from './place-landmark'
import { applyRemoveLandmark, invertRemoveLandmark } from './remove-landmark'
import type { RemoveLandmark } from './remove-landmark'
import { applyReplaceDocument, invertReplaceDocument } from './replace-document'
import type { ReplaceDocument } from './replace-document'
import { applySetCircumstance, invertSetCircumstance } from './set-circumstance'
import type { SetCircumstance } from './set-circumstance'
import { applySetNotVisible, invertSetNotVisible } from './set-not-visible'
import type { SetNotVisible } from './set-not-visible'
import { applySetPlumbLine, invertSetPlumbLine } from './set-plumb-line'
import type { SetPlumbLine } from './set-plumb-line'
import { applySetScale, invertSetScale } from './set-scale'
import type { SetScale } from './set-scale'

/** Everything that can change a marking: plain JSON, so that undo and redo can be kept with a draft. */
export type MarkingCommand =
  | PlaceLandmark | MoveLandmark | RemoveLandmark | SetNotVisible
  | SetPlumbLine | MovePlumbLineEnd | SetScale | MoveScaleEnd
  | SetCircumstance | ReplaceDocument

/**
 * @param command made for this very `document` (each command carries what it found).
 * @returns the document after it; `document` itself is untouched.
 */
export function applyCommand(document: MarkingDocument, command: MarkingCommand): MarkingDocument {
  switch (command.type) {
    case 'landmark.place': return applyPlaceLandmark(document, command)
    case 'landmark.move': return applyMoveLandmark(document, command)
    case 'landmark.remove': return applyRemoveLandmark(document, command)
    case 'landmark.set-not-visible': return applySetNotVisible(document, command)
    case 'plumb-line.set': return applySetPlumbLine(document, command)
    case 'plumb-line.move-end': return applyMovePlumbLineEnd(document, command)
    case 'scale.set': return applySetScale(document, command)
    case 'scale.move-end': return applyMoveScaleEnd(document, command)
    case 'circumstance.set': return applySetCircumstance(document, command)
    case 'document.replace': return applyReplaceDocument(document, command)
  }
}

/** @returns the command that takes `command` back: `applyCommand(invertCommand(c), applyCommand(c, d))` equals `d`. */
export function invertCommand(command: MarkingCommand): MarkingCommand {
  switch (command.type) {
    case 'landmark.place': return invertPlaceLandmark(command)
    case 'landmark.move': return invertMoveLandmark(command)
    case 'landmark.remove': return invertRemoveLandmark(command)
    case 'landmark.set-not-visible': return invertSetNotVisible(command)
    case 'plumb-line.set': return invertSetPlumbLine(command)
    case 'plumb-line.move-end': return invertMovePlumbLineEnd(command)
    case 'scale.set': return invertSetScale(command)
    case 'scale.move-end': return invertMoveScaleEnd(command)
    case 'circumstance.set': return invertSetCircumstance(command)
    case 'document.replace': return invertReplaceDocument(command)
  }
}
