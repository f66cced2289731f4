import type { PlumbLine } from '#shared/geometry/marking'
import type { MarkingDocument } from '../document'

/** The plumb line is drawn, drawn anew, moved as a whole, or taken away (`to` null). */
export interface SetPlumbLine {
  readonly type: 'plumb-line.set'
  readonly from: PlumbLine | null
  readonly to: PlumbLine | null
}

/** @param to ends in pixels of the review copy. @returns `null` when there is no line and none is asked for. */
export function setPlumbLine(document: MarkingDocument, to: PlumbLine | null): SetPlumbLine | null {
  return document.plumbLine === null && to === null ? null : { type: 'plumb-line.set', from: document.plumbLine, to }
}

export function applySetPlumbLine(document: MarkingDocument, command: SetPlumbLine): MarkingDocument {
  return { ...document, plumbLine: command.to }
}

export function invertSetPlumbLine(command: SetPlumbLine): SetPlumbLine {
  return { ...command, from: command.to, to: command.from }
}
