import { MarkingDraftSchema, type MarkingDraft } from '#shared/schemas/marking-draft'
import type { MarkingHistory } from './history'

/** What is kept beside the history. */
export type DraftOrigin = Pick<MarkingDraft, 'userId' | 'stillId' | 'base' | 'keptAt'>

/** A draft as it comes back: its commands are those of the model. */
export type KeptDraft = Readonly<Omit<MarkingDraft, 'history'>> & { readonly history: MarkingHistory }

/** @returns the draft as text; undo and redo go with it. */
export function writeDraft(origin: DraftOrigin, history: MarkingHistory): string {
  const draft: KeptDraft = { format: 1, ...origin, history }
  return JSON.stringify(draft)
}

/** @returns the draft, or `null` when the text is none of ours, of another format, or another person's. */
export function readDraft(text: string, owner: Pick<DraftOrigin, 'userId' | 'stillId'>): KeptDraft | null {
  const parsed = MarkingDraftSchema.safeParse(parseJson(text))
  if (!parsed.success) return null
  const draft = parsed.data
  return draft.userId === owner.userId && draft.stillId === owner.stillId ? draft : null
}

function parseJson(text: string): unknown {
  try {
    return JSON.parse(text)
  } catch {
    // Not JSON is one of the ways in which a text is no draft.
    return null
  }
}

const KEY_PREFIX = 'standmark.draft.'

/** @returns the name under which the draft of one person on one still is kept. */
export function draftKey(userId: string, stillId: string): string {
  return `${KEY_PREFIX}${userId}.${stillId}`
}

/** @returns whether a storage key is a draft's; with `userId`, whether it is that person's. */
export function isDraftKey(key: string, userId?: string): boolean {
  return key.startsWith(userId === undefined ? KEY_PREFIX : `${KEY_PREFIX}${userId}.`)
}
