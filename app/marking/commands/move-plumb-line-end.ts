import type { MarkedPoint } from '#shared/geometry/marking'
import type { MarkingDocument } from '../document'

export type PlumbLineEnd = 'top' | 'bottom'

/** One end of the plumb line goes from one place to another. */
export interface MovePlumbLineEnd {
  readonly type: 'plumb-line.move-end'
  readonly end: PlumbLineEnd
  readonly from: MarkedPoint
  readonly to: MarkedPoint
}

/** @param to pixels of the review copy. @returns `null` when there is no plumb line or the end would stay where it is. */
export function movePlumbLineEnd(document: MarkingDocument, end: PlumbLineEnd, to: MarkedPoint): MovePlumbLineEnd | null {
  const from = document.plumbLine?.[end]
  if (!from || (from.x === to.x && from.y === to.y)) return null
  return { type: 'plumb-line.move-end', end, from, to: { x: to.x, y: to.y } }
}

export function applyMovePlumbLineEnd(document: MarkingDocument, command: MovePlumbLineEnd): MarkingDocument {
  if (!document.plumbLine) return document
  return { ...document, plumbLine: { ...document.plumbLine, [command.end]: command.to } }
}

export function invertMovePlumbLineEnd(command: MovePlumbLineEnd): MovePlumbLineEnd {
  return { ...command, from: command.to, to: command.from }
}
