import type { Scale } from '#shared/geometry/marking'
import type { MarkingDocument } from '../document'

/** The scale is drawn, drawn anew, given another length, or taken away (`to` null). */
export interface SetScale {
  readonly type: 'scale.set'
  readonly from: Scale | null
  readonly to: Scale | null
}

/** @param to ends in pixels of the review copy, length in millimetres. @returns `null` when there is no scale and none is asked for. */
export function setScale(document: MarkingDocument, to: Scale | null): SetScale | null {
  return document.scale === null && to === null ? null : { type: 'scale.set', from: document.scale, to }
}

export function applySetScale(document: MarkingDocument, command: SetScale): MarkingDocument {
  return { ...document, scale: command.to }
}

export function invertSetScale(command: SetScale): SetScale {
  return { ...command, from: command.to, to: command.from }
}
