import type { Clip } from '#shared/schemas/clip'
import { MarkingSchema, type Marking } from '#shared/schemas/marking'
import type { ClipStill } from '#shared/schemas/still'
import { EMPTY_DOCUMENT } from '~/marking/document'
import type { MarkingDocument } from '~/marking/document'
import { createHistory } from '~/marking/history'
import { fromMarkingFields, inheritSetting, toMarkingFields } from '~/marking/marking-body'
import type { OpenMarking, SavedVersion } from '~/stores/useMarkingStore'

/** How many acts can be undone. */
const HISTORY_CAPACITY = 400

export interface MarkingConflict { readonly stillId: string, readonly theirs: Marking }

/** @returns what a saved version is known by. */
export function versionOf(marking: Marking): SavedVersion {
  return { markingId: marking.id, version: marking.version, status: marking.status, savedAt: marking.savedAt, authorName: marking.author.name }
}

function newest(markings: readonly Marking[]): Marking | null {
  return markings.toSorted((a, b) => b.savedAt.localeCompare(a.savedAt))[0] ?? null
}

/** Reads the markings of a clip's stills. A new still begins with the plumb line, scale and circumstances of the clip's last marking. */
export function useMarkingRecord(clip: Clip, stills: Ref<readonly ClipStill[]>, isSupported: boolean) {
  const api = useApi()
  const store = useMarkingStore()
  const draft = useMarkingDraft()
  const problem = shallowRef<ApiProblem | null>(null)
  const opening = ref<string | null>(null)
  const conflict = shallowRef<MarkingConflict | null>(null)
  /** The question can be put off; saving asks it again. */
  const isConflictOpen = ref(true)
  watch(conflict, () => { isConflictOpen.value = true })

  async function inheritedDocument(): Promise<MarkingDocument> {
    const ids = stills.value.map(still => still.id)
    const underWork = Object.values(store.open).findLast(marking => ids.includes(marking.stillId) && store.isDirty(marking.stillId))
    if (underWork) return inheritSetting(underWork.history.document)
    const last = stills.value.flatMap(still => still.markings).toSorted((a, b) => b.savedAt.localeCompare(a.savedAt))[0]
    if (last) return inheritSetting(fromMarkingFields((await api<Marking>(`/api/markings/${last.id}`)).body))
    // Facing picture right shows the person's right side, unless the file is mirrored; the foot or the person may correct it.
    return { ...EMPTY_DOCUMENT, side: clip.side, facing: clip.side, supported: isSupported }
  }

  function withDraft(stillId: string, saved: Marking | null, savedDocument: MarkingDocument): OpenMarking {
    const kept = draft.restore(stillId)
    const base = saved && versionOf(saved)
    const place = { upTo: 'core', skipped: [] } as const
    if (!kept) return { stillId, history: createHistory(savedDocument, HISTORY_CAPACITY), base, savedDocument, place, keptAt: null }
    const isBehind = saved !== null && (kept.base?.markingId !== saved.id || kept.base.version !== saved.version)
    if (isBehind) conflict.value = { stillId, theirs: saved }
    return { stillId, history: kept.history, base, savedDocument, place, keptAt: kept.keptAt }
  }

  /** Opens the marking of a still, with the draft of this tab if there is one. */
  async function openStill(stillId: string) {
    if (store.markingOf(stillId) || opening.value === stillId) return
    opening.value = stillId
    problem.value = null
    try {
      const { items } = await api<{ items: Marking[] }>(`/api/stills/${stillId}/markings`)
      const saved = newest(items)
      store.put(withDraft(stillId, saved, saved ? fromMarkingFields(saved.body) : await inheritedDocument()))
    } catch (error) {
      problem.value = parseApiError(error)
    } finally {
      if (opening.value === stillId) opening.value = null
    }
  }

  return { problem, opening, conflict, isConflictOpen, openStill }
}

/** Saves markings as new versions; nothing that someone else saved is written over unseen. */
export function useMarkingSave(clip: Clip, { conflict, isConflictOpen }: Pick<ReturnType<typeof useMarkingRecord>, 'conflict' | 'isConflictOpen'>) {
  const api = useApi()
  const store = useMarkingStore()
  const draft = useMarkingDraft()
  const isSaving = ref(false)
  const problem = shallowRef<ApiProblem | null>(null)
  /** After a lost answer it is unknown whether the first version exists: looked up before another is made. */
  const unsure = new Set<string>()

  async function send(marking: OpenMarking, status: 'draft' | 'final'): Promise<Marking> {
    const body = { ...toMarkingFields(marking.history.document, clip.view), status }
    if (marking.base) return api<Marking>(`/api/markings/${marking.base.markingId}`, { method: 'PUT', body, version: marking.base.version })
    return api<Marking>(`/api/stills/${marking.stillId}/markings`, { method: 'POST', body, idempotencyKey: crypto.randomUUID() })
  }

  async function withCertainBase(marking: OpenMarking): Promise<OpenMarking> {
    if (marking.base || !unsure.has(marking.stillId)) return marking
    const found = newest((await api<{ items: Marking[] }>(`/api/stills/${marking.stillId}/markings`)).items)
    return { ...marking, base: found && versionOf(found) }
  }

  function onFailure(stillId: string, error: unknown) {
    const failure = parseApiError(error)
    const theirs = failure.code === 'stale-version' ? MarkingSchema.safeParse(failure.current) : null
    if (theirs?.success) conflict.value = { stillId, theirs: theirs.data }
    else problem.value = failure
    if (failure.code === 'network') unsure.add(stillId)
  }

  /** @returns whether it is saved. What was changed meanwhile stays unsaved. */
  async function save(stillId: string, status: 'draft' | 'final'): Promise<boolean> {
    const marking = store.markingOf(stillId)
    if (!marking || isSaving.value) return false
    if (conflict.value?.stillId === stillId) {
      isConflictOpen.value = true
      return false
    }
    isSaving.value = true
    problem.value = null
    try {
      const saved = await send(await withCertainBase(marking), status)
      unsure.delete(stillId)
      store.setBase(stillId, versionOf(saved), marking.history.document)
      const now = store.markingOf(stillId)
      if (now) draft.keep(now)
      return true
    } catch (error) {
      onFailure(stillId, error)
      return false
    } finally {
      isSaving.value = false
    }
  }

  return { isSaving, problem, save }
}
