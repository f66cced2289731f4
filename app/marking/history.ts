import { applyCommand, invertCommand } from './commands/marking-command'
import type { MarkingCommand } from './commands/marking-command'
import type { MarkingDocument } from './document'

/**
 * A document with the commands that led to it and those that were taken back. Plain immutable JSON.
 * Selection, zoom, hover and frame seek are no commands and never touch it.
 */
export interface MarkingHistory {
  readonly document: MarkingDocument
  /** Oldest first. */
  readonly past: readonly MarkingCommand[]
  /** Next to redo last. */
  readonly future: readonly MarkingCommand[]
  /** How many commands can be undone; the oldest are forgotten first. */
  readonly capacity: number
}

/** @throws RangeError when `capacity` is no positive whole number. */
export function createHistory(document: MarkingDocument, capacity: number): MarkingHistory {
  if (!Number.isInteger(capacity) || capacity < 1) throw new RangeError(`history capacity must be a positive whole number, got ${capacity}`)
  return { document, past: [], future: [], capacity }
}

/** @returns the history with `command` done; what could be redone is forgotten. */
export function execute(history: MarkingHistory, command: MarkingCommand): MarkingHistory {
  return {
    ...history,
    document: applyCommand(history.document, command),
    past: [...history.past, command].slice(-history.capacity),
    future: [],
  }
}

export function canUndo(history: MarkingHistory): boolean {
  return history.past.length > 0
}

export function canRedo(history: MarkingHistory): boolean {
  return history.future.length > 0
}

/** @returns the history with the last command taken back; unchanged when there is none. */
export function undo(history: MarkingHistory): MarkingHistory {
  const command = history.past.at(-1)
  if (!command) return history
  return {
    ...history,
    document: applyCommand(history.document, invertCommand(command)),
    past: history.past.slice(0, -1),
    future: [...history.future, command],
  }
}

/** @returns the history with the last undone command done again; unchanged when there is none. */
export function redo(history: MarkingHistory): MarkingHistory {
  const command = history.future.at(-1)
  if (!command) return history
  return {
    ...history,
    document: applyCommand(history.document, command),
    past: [...history.past, command],
    future: history.future.slice(0, -1),
  }
}
