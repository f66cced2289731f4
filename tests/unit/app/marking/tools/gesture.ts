import { imagePoint } from '#shared/geometry/point'
import { EMPTY_DOCUMENT } from '~/marking/document'
import type { MarkingDocument } from '~/marking/document'
import { applyCommand } from '~/marking/commands/marking-command'
import type { MarkingCommand } from '~/marking/commands/marking-command'
import { startTool } from '~/marking/tools/tool-start'
import type { ToolContext, ToolId, ToolNotice, Transition } from '~/marking/tools/tool'

export const PICTURE = { width: 1440, height: 1080 }

interface Start { document?: MarkingDocument, target?: string | null, chosen?: string | null, reach?: number, tightReach?: number, scaleLengthMm?: number }

/** Plays a gesture on a tool as the bench does: commands are done, previews are only kept. */
export function gesture(tool: ToolId, start: Start = {}) {
  const reach = start.reach ?? 12
  const tightReach = start.tightReach ?? 6
  let state = startTool(tool)
  let document = start.document ?? EMPTY_DOCUMENT
  let preview: MarkingCommand | null = null
  let selected: string | null = null
  const commands: MarkingCommand[] = []
  const notices: ToolNotice[] = []
  const moves: { x: number, y: number }[] = []
  const context = (): ToolContext => ({ document, picture: PICTURE, target: start.target ?? null, chosen: start.chosen ?? null, scaleLengthMm: start.scaleLengthMm ?? 1000 })

  function take(transition: Transition | undefined) {
    if (!transition) return played
    state = transition.next
    if (transition.preview !== undefined) preview = transition.preview
    if (transition.selected !== undefined) selected = transition.selected
    if (transition.notice) notices.push(transition.notice)
    if (transition.moveView) moves.push({ x: transition.moveView.x, y: transition.moveView.y })
    if (transition.command) {
      commands.push(transition.command)
      document = applyCommand(document, transition.command)
    }
    return played
  }

  const played = {
    press: (x: number, y: number) => take(state.onPointerDown?.({ at: imagePoint(x, y), reach, tightReach }, context())),
    move: (x: number, y: number) => take(state.onPointerMove?.({ at: imagePoint(x, y), reach, tightReach }, context())),
    release: (x: number, y: number) => take(state.onPointerUp?.({ at: imagePoint(x, y), reach, tightReach }, context())),
    key: (key: string) => take(state.onKey?.(key, context())),
    cancel: () => take(state.onCancel?.()),
    get document() { return document },
    get shown() { return preview ? applyCommand(document, preview) : document },
    get preview() { return preview },
    get commands() { return commands },
    get notices() { return notices },
    get moves() { return moves },
    get selected() { return selected },
    get state() { return state.id },
  }
  return played
}
