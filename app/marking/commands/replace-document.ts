import type { MarkingDocument } from '../document'

/** The whole marking is exchanged, as when a person takes over the version that someone else saved. */
export interface ReplaceDocument {
  readonly type: 'document.replace'
  readonly from: MarkingDocument
  readonly to: MarkingDocument
}

export function replaceDocument(document: MarkingDocument, to: MarkingDocument): ReplaceDocument {
  return { type: 'document.replace', from: document, to }
}

export function applyReplaceDocument(_document: MarkingDocument, command: ReplaceDocument): MarkingDocument {
  return command.to
}

export function invertReplaceDocument(command: ReplaceDocument): ReplaceDocument {
  return { ...command, from: command.to, to: command.from }
}
