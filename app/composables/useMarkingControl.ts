import { createBenchActions, type BenchControl, type BenchSituation } from '~/marking/actions'
import { removeLandmark } from '~/marking/commands/remove-landmark'
import { canRedo, canUndo } from '~/marking/history'
import type { MarkingParts } from './useMarkingBench'

/** The acts of the bench, for buttons, keys and the keyboard help alike, and when each can run. */
export function useMarkingControl(parts: MarkingParts) {
  const { source, player, stills, saving, marking, run, view, tools, nudging, guide, document, isAskingNotVisible } = parts
  const store = useMarkingStore()

  const isDirty = computed(() => marking.value !== null && store.isDirty(marking.value.stillId))

  const situation = computed<BenchSituation>(() => ({
    canUndo: marking.value !== null && canUndo(marking.value.history),
    canRedo: marking.value !== null && canRedo(marking.value.history),
    frame: source.wanted.value,
    frameCount: player.lastFrame + 1,
    isMarking: marking.value !== null,
    isMarkSelected: tools.selected.value !== null && document.value?.landmarks[tools.selected.value] !== undefined,
    hasTarget: guide.next.value !== null,
    isZoomed: view.isZoomed.value,
    isDirty: isDirty.value,
    canFinish: isDirty.value || marking.value?.base?.status === 'draft',
    isBusy: saving.isSaving.value || stills.isPicking.value,
  }))

  function onMarking(act: (stillId: string) => void) {
    if (marking.value) act(marking.value.stillId)
  }

  function letGo() {
    if (tools.isGesture.value) return tools.cancel()
    if (tools.toolId.value !== 'landmark') return tools.choose('landmark')
    tools.selected.value = null
    guide.ask(null)
  }

  const control: BenchControl = {
    undo: () => onMarking(store.undo),
    redo: () => onMarking(store.redo),
    stepFrames: player.step,
    goToFrame: player.goTo,
    togglePlay: player.togglePlay,
    markFrame: () => void stills.pick(player.frame.value),
    zoom: factor => view.zoom(factor),
    fit: view.fit,
    chooseTool: tool => tools.choose(tools.toolId.value === tool ? 'landmark' : tool),
    nudge: (dx, dy) => { if (tools.selected.value) nudging.nudge(tools.selected.value, dx, dy) },
    removeMark: () => run(document.value && tools.selected.value ? removeLandmark(document.value, tools.selected.value) : null),
    askNotVisible: () => { isAskingNotVisible.value = true },
    skip: () => { if (guide.next.value) guide.skip(guide.next.value.id) },
    letGo,
    save: status => onMarking(stillId => void saving.save(stillId, status)),
  }
  return { situation, actions: createBenchActions(control) }
}
