import type { MarkedPoint } from '#shared/geometry/marking'
import type { MarkingDocument } from '../document'

export type ScaleEnd = 'from' | 'to'

/** One end of the scale goes from one place to another; its length in millimetres stays. */
export interface MoveScaleEnd {
  readonly type: 'scale.move-end'
  readonly end: ScaleEnd
  readonly from: MarkedPoint
  readonly to: MarkedPoint
}

/** @param to pixels of the review copy. @returns `null` when there is no scale or the end would stay where it is. */
export function moveScaleEnd(document: MarkingDocument, end: ScaleEnd, to: MarkedPoint): MoveScaleEnd | null {
  const from = document.scale?.[end]
  if (!from || (from.x === to.x && from.y === to.y)) return null
  return { type: 'scale.move-end', end, from, to: { x: to.x, y: to.y } }
}

export function applyMoveScaleEnd(document: MarkingDocument, command: MoveScaleEnd): MarkingDocument {
  if (!document.scale) return document
  return { ...document, scale: { ...document.scale, [command.end]: command.to } }
}

export function invertMoveScaleEnd(command: MoveScaleEnd): MoveScaleEnd {
  return { ...command, from: command.to, to: command.from }
}
