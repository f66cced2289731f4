import type { Facing } from '#shared/geometry/marking'
import type { Side } from '#shared/geometry/landmarks'
import type { MarkingDocument } from '../document'

/** What is said about the whole picture rather than drawn on it. */
export type Circumstance =
  | { readonly name: 'facing', readonly from: Facing | null, readonly to: Facing | null }
  | { readonly name: 'side', readonly from: Side | null, readonly to: Side | null }
  | { readonly name: 'mirrored' | 'clothed' | 'supported', readonly from: boolean, readonly to: boolean }

/** Facing, near side, mirrored file, clothing or support is said or said anew. */
export interface SetCircumstance {
  readonly type: 'circumstance.set'
  readonly change: Circumstance
}

export type Flag = 'mirrored' | 'clothed' | 'supported'

/** @returns the command, or `null` when it would change nothing. */
export function setFacing(document: MarkingDocument, to: Facing | null): SetCircumstance | null {
  return document.facing === to ? null : { type: 'circumstance.set', change: { name: 'facing', from: document.facing, to } }
}

/** @returns the command, or `null` when it would change nothing. */
export function setSide(document: MarkingDocument, to: Side | null): SetCircumstance | null {
  return document.side === to ? null : { type: 'circumstance.set', change: { name: 'side', from: document.side, to } }
}

/** @returns the command, or `null` when it would change nothing. */
export function setFlag(document: MarkingDocument, name: Flag, to: boolean): SetCircumstance | null {
  return document[name] === to ? null : { type: 'circumstance.set', change: { name, from: document[name], to } }
}

export function applySetCircumstance(document: MarkingDocument, command: SetCircumstance): MarkingDocument {
  const { change } = command
  if (change.name === 'facing') return { ...document, facing: change.to }
  if (change.name === 'side') return { ...document, side: change.to }
  return { ...document, [change.name]: change.to }
}

export function invertSetCircumstance(command: SetCircumstance): SetCircumstance {
  const { change } = command
  if (change.name === 'facing') return { ...command, change: { ...change, from: change.to, to: change.from } }
  if (change.name === 'side') return { ...command, change: { ...change, from: change.to, to: change.from } }
  return { ...command, change: { ...change, from: change.to, to: change.from } }
}
