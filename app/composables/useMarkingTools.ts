import type { ImagePoint } from '#shared/geometry/point'
import type { MarkingCommand } from '~/marking/commands/marking-command'
import { EMPTY_DOCUMENT, type MarkingDocument } from '~/marking/document'
import type { ToolContext, ToolId, ToolNotice, ToolState, Transition } from '~/marking/tools/tool'
import { startTool } from '~/marking/tools/tool-start'
import type { Size } from '~/marking/viewport'

export interface MarkingToolsOptions {
  readonly picture: Size
  /** The marking of the frame in sight, or `null` when there is none: then the picture can only be moved. */
  readonly document: Ref<MarkingDocument | null>
  readonly target: Ref<string | null>
  /** The command that letting go now would make. */
  readonly preview: Ref<MarkingCommand | null>
  readonly run: (command: MarkingCommand) => void
  readonly moveView: (by: { readonly x: number, readonly y: number }) => void
}

type PointerKind = 'onPointerDown' | 'onPointerMove' | 'onPointerUp'

/** Holds the tool in hand and passes events to it; what comes back is drawn, done or said. */
export function useMarkingTools(options: MarkingToolsOptions) {
  const toolId = ref<ToolId>('landmark')
  const scaleLengthMm = ref(1000)
  const { preview } = options
  const selected = ref<string | null>(null)
  /** Gone to by name on the body map or in the list, until the next act. */
  const chosen = ref<string | null>(null)
  const notice = ref<ToolNotice | null>(null)
  const stateId = ref('landmark.idle')
  let state: ToolState = startTool('landmark')

  /** Without a marking there is nothing to take and nothing to place: a press moves the picture. */
  function context(): ToolContext {
    const document = options.document.value
    const target = document ? options.target.value : null
    return { document: document ?? EMPTY_DOCUMENT, picture: options.picture, target, chosen: chosen.value, scaleLengthMm: scaleLengthMm.value }
  }

  function take(transition: Transition | undefined) {
    if (!transition) return
    state = transition.next
    stateId.value = state.id
    if (transition.preview !== undefined) preview.value = transition.preview
    if (transition.selected !== undefined) selected.value = transition.selected
    if (transition.notice) notice.value = transition.notice
    if (transition.moveView) options.moveView(transition.moveView)
    if (transition.command) finish(transition.command)
  }

  function finish(command: MarkingCommand) {
    notice.value = null
    chosen.value = null
    options.run(command)
    // Plumb line and scale are drawn once; the next press is for a landmark again.
    if (command.type === 'plumb-line.set' || command.type === 'scale.set') choose('landmark')
  }

  function choose(id: ToolId) {
    cancel()
    toolId.value = id
    state = startTool(id)
    stateId.value = state.id
  }

  /** Drops a gesture that has begun: the document is as it was before it. */
  function cancel() {
    take(state.onCancel?.())
    preview.value = null
  }

  function send(kind: PointerKind, at: ImagePoint, reach: number, tightReach: number) {
    take(state[kind]?.({ at, reach, tightReach }, context()))
  }

  return { toolId, scaleLengthMm, selected, chosen, notice, stateId, isGesture: computed(() => !stateId.value.endsWith('.idle')), choose, cancel, send }
}
