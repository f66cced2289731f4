import type { MarkingCommand } from '~/marking/commands/marking-command'
import { isSameDocument } from '~/marking/document'
import type { MarkingDocument } from '~/marking/document'
import type { GuidePlace } from '~/marking/guide'
import { execute, redo, undo } from '~/marking/history'
import type { MarkingHistory } from '~/marking/history'

/** The version on the server that a marking was read from or saved as. */
export interface SavedVersion {
  readonly markingId: string
  readonly version: number
  readonly status: 'draft' | 'final'
  readonly savedAt: string
  readonly authorName: string
}

/** The marking of one still as it is being worked on. */
export interface OpenMarking {
  readonly stillId: string
  readonly history: MarkingHistory
  /** `null` until it is saved for the first time. */
  readonly base: SavedVersion | null
  /** What the server holds, or what the still began with. */
  readonly savedDocument: MarkingDocument
  readonly place: GuidePlace
  /** When the draft was last kept in the browser, milliseconds since 1970. */
  readonly keptAt: number | null
}

/** Markings under work, by still. They outlive the page: going to another frame or back from the chart loses nothing. */
export const useMarkingStore = defineStore('marking', () => {
  const open = shallowRef<Readonly<Record<string, OpenMarking>>>({})

  function markingOf(stillId: string): OpenMarking | null {
    return open.value[stillId] ?? null
  }

  function put(marking: OpenMarking) {
    open.value = { ...open.value, [marking.stillId]: marking }
  }

  function change(stillId: string, update: (marking: OpenMarking) => Partial<OpenMarking>) {
    const marking = markingOf(stillId)
    if (marking) put({ ...marking, ...update(marking) })
  }

  function isDirty(stillId: string): boolean {
    const marking = markingOf(stillId)
    return marking !== null && !isSameDocument(marking.history.document, marking.savedDocument)
  }

  return {
    open,
    markingOf,
    put,
    isDirty,
    dirtyIds: () => Object.keys(open.value).filter(isDirty),
    run: (stillId: string, command: MarkingCommand) => change(stillId, marking => ({ history: execute(marking.history, command) })),
    undo: (stillId: string) => change(stillId, marking => ({ history: undo(marking.history) })),
    redo: (stillId: string) => change(stillId, marking => ({ history: redo(marking.history) })),
    setPlace: (stillId: string, place: GuidePlace) => change(stillId, () => ({ place })),
    setKept: (stillId: string, keptAt: number | null) => change(stillId, () => ({ keptAt })),
    setBase: (stillId: string, base: SavedVersion, savedDocument: MarkingDocument) => change(stillId, () => ({ base, savedDocument })),
    forget: () => { open.value = {} },
  }
})
