import type { View } from '#shared/geometry/landmarks'
import type { MarkingDocument } from '~/marking/document'
import { completedBy, guideOrder, guideProgress, landmarkAfter, nextLandmark, nextOpenSet } from '~/marking/guide'
import type { GuidePlace, GuideSet } from '~/marking/guide'

export interface MarkingGuideOptions {
  readonly view: View
  readonly document: Ref<MarkingDocument | null>
  readonly place: Ref<GuidePlace>
  readonly setPlace: (place: GuidePlace) => void
}

/** The next landmark and how far one is. A landmark that was asked for by name comes before the guide's own next. */
export function useMarkingGuide({ view, document, place, setPlace }: MarkingGuideOptions) {
  const order = guideOrder(view)
  const all = [...order.core, ...order.more, ...order.unasked, ...order.equipment]
  const requested = ref<string | null>(null)
  const guided = computed(() => document.value && nextLandmark(document.value, order, place.value))
  const next = computed(() => all.find(landmark => landmark.id === requested.value) ?? guided.value)
  const progress = computed(() => document.value && guideProgress(document.value, order, place.value))
  const then = computed(() => document.value && next.value ? landmarkAfter(document.value, order, place.value, next.value.id) : null)
  /** The plumb line is part of the guide once the core set is done; it is set once a clip. */
  const isPlumbLineNext = computed(() => document.value !== null
    && document.value.plumbLine === null
    && progress.value?.isCoreDone === true
    && requested.value === null
    && !place.value.skipped.includes('plumb-line'))
  const setAfter = computed(() => document.value && !guided.value ? nextOpenSet(document.value, order, place.value.upTo) : null)

  function skip(id: string) {
    requested.value = null
    setPlace({ ...place.value, skipped: [...place.value.skipped.filter(name => name !== id), id] })
  }

  function ask(id: string | null) {
    requested.value = id
    // Landmarks of a folded set that are asked for by name unfold it.
    const set = (['more', 'equipment'] as const).find(name => order[name].some(landmark => landmark.id === id))
    if (set === 'equipment' || (set === 'more' && place.value.upTo === 'core')) setPlace({ ...place.value, upTo: set })
  }

  return {
    order, all, place, next, then, progress, isPlumbLineNext, setAfter, requested, skip, ask,
    goOn: (upTo: GuideSet) => setPlace({ ...place.value, upTo }),
    completes: (id: string) => document.value ? completedBy(document.value, view, id) : [],
  }
}
