import { draftKey, isDraftKey, readDraft, writeDraft } from '~/marking/draft'
import type { KeptDraft } from '~/marking/draft'
import { isDocumentEmpty } from '~/marking/document'
import type { OpenMarking } from '~/stores/useMarkingStore'

/**
 * Drafts of this tab: coordinates and opaque ids only, under the person's own id, until they are saved. They survive
 * a reload and a crash of the page; closing the tab or signing out ends them.
 */
export function useMarkingDraft() {
  const session = useSessionStore()
  const store = useMarkingStore()

  /** Writes the draft, or takes it away when there is nothing to keep. @returns whether the browser let us. */
  function keep(marking: OpenMarking): boolean {
    const userId = session.me?.id
    if (!userId) return false
    const key = draftKey(userId, marking.stillId)
    if (!store.isDirty(marking.stillId) || (isDocumentEmpty(marking.history.document) && !marking.base)) {
      sessionStorage.removeItem(key)
      store.setKept(marking.stillId, null)
      return true
    }
    const keptAt = Date.now()
    const base = marking.base && { markingId: marking.base.markingId, version: marking.base.version }
    try {
      sessionStorage.setItem(key, writeDraft({ userId, stillId: marking.stillId, base, keptAt }, marking.history))
    } catch {
      // Storage full or closed to us: the work stays in memory, and the bench says that it is not kept.
      store.setKept(marking.stillId, null)
      return false
    }
    store.setKept(marking.stillId, keptAt)
    return true
  }

  function restore(stillId: string): KeptDraft | null {
    const userId = session.me?.id
    const text = userId ? sessionStorage.getItem(draftKey(userId, stillId)) : null
    return userId && text !== null ? readDraft(text, { userId, stillId }) : null
  }

  return { keep, restore, has: (stillId: string) => restore(stillId) !== null }
}

/** Takes every draft of this tab away, other than those of `exceptUserId`. */
export function clearMarkingDrafts(exceptUserId?: string) {
  for (const key of Object.keys(sessionStorage)) {
    if (isDraftKey(key) && !(exceptUserId !== undefined && isDraftKey(key, exceptUserId))) sessionStorage.removeItem(key)
  }
}
