import type { Clip } from '#shared/schemas/clip'
import type { ClipStill } from '#shared/schemas/still'
import { applyCommand, type MarkingCommand } from '~/marking/commands/marking-command'
import type { MarkingDocument } from '~/marking/document'
import type { FrameTable } from '~/marking/frames/frame-table'
import type { Size } from '~/marking/viewport'

/** How long after an act the draft is written, at the latest. */
const DRAFT_MS = 250

export interface MarkingBenchOptions {
  readonly clip: Clip
  readonly picture: Size
  readonly table: FrameTable
  readonly stills: Ref<readonly ClipStill[]>
  /** Whether the bout of the clip logs support for body weight or arms. */
  readonly isSupported: boolean
}

/** The marking of the still in sight, and the document as drawn: with the gesture that is going on. */
function useOpenMarking(stillId: Ref<string | null>, preview: Ref<MarkingCommand | null>) {
  const store = useMarkingStore()
  const draft = useMarkingDraft()
  const marking = computed(() => stillId.value === null ? null : store.open[stillId.value] ?? null)
  const document = computed(() => marking.value?.history.document ?? null)
  const shown = computed<MarkingDocument | null>(() => document.value && preview.value ? applyCommand(document.value, preview.value) : document.value)
  const isDraftKept = ref(true)

  watchDebounced(() => marking.value?.history, () => {
    if (marking.value) isDraftKept.value = draft.keep(marking.value)
  }, { debounce: DRAFT_MS, maxWait: DRAFT_MS * 2 })
  useEventListener('pagehide', () => {
    if (marking.value) draft.keep(marking.value)
  })
  return { marking, document, shown, isDraftKept }
}

/** Frames, still, marking, tools, guide and readings of one clip, put together. */
export function useMarkingParts({ clip, picture, table, stills: list, isSupported }: MarkingBenchOptions) {
  const store = useMarkingStore()
  const source = useFrameSource({ clipId: clip.id, table, width: picture.width, height: picture.height })
  const player = useFramePlayer(table, source)
  const record = useMarkingRecord(clip, list, isSupported)
  const saving = useMarkingSave(clip, record)
  const restingFrame = computed(() => player.isPlaying.value ? null : source.shown.value?.frame ?? null)
  const stills = useMarkingStills({ clip, stills: list, frame: restingFrame, openStill: record.openStill })
  const preview = shallowRef<MarkingCommand | null>(null)
  const { marking, document, shown, isDraftKept } = useOpenMarking(computed(() => stills.current.value?.id ?? null), preview)

  /** Does an act on the marking in sight; `null` is one that would change nothing. */
  function run(command: MarkingCommand | null) {
    if (marking.value && command) store.run(marking.value.stillId, command)
    guide.requested.value = null
  }

  const view = useMarkingView(picture)
  const guide = useMarkingGuide({
    view: clip.view,
    document,
    place: computed(() => marking.value?.place ?? { upTo: 'core', skipped: [] }),
    setPlace: (place) => { if (marking.value) store.setPlace(marking.value.stillId, place) },
  })
  const target = computed(() => guide.next.value?.id ?? null)
  const tools = useMarkingTools({ picture, document, target, preview, run, moveView: view.moveView })
  const nudging = useMarkingNudge({ picture, document, preview, run })
  const readings = useMarkingReadings(clip.view, picture, document, shown)
  const isAskingNotVisible = ref(false)

  // Leaving the frame drops a gesture and lets go of what was selected: they belong to the picture.
  watch(() => stills.current.value?.id, () => {
    tools.choose('landmark')
    tools.selected.value = null
    tools.chosen.value = null
    guide.requested.value = null
    isAskingNotVisible.value = false
  })
  return { clip, picture, table, list, source, player, record, saving, stills, marking, document, shown, preview, isDraftKept, run, view, guide, tools, nudging, readings, isAskingNotVisible }
}

export type MarkingParts = ReturnType<typeof useMarkingParts>

/** The bench of one clip. */
export function useMarkingBench(options: MarkingBenchOptions) {
  const parts = useMarkingParts(options)
  return { ...parts, ...useMarkingControl(parts) }
}

export type MarkingBench = ReturnType<typeof useMarkingBench>
