import { moveLandmark } from '../../commands/move-landmark'
import { placeLandmark } from '../../commands/place-landmark'
import type { MarkingCommand } from '../../commands/marking-command'
import { clampToPicture } from '../../viewport'
import type { PointerInput, ToolContext, ToolState, Transition } from '../tool'

/**
 * The target follows the pointer until it is let go. A target that is marked already is moved there
 * (it was asked for by name, to be placed anew).
 */
export function placing(landmark: string, input: PointerInput, context: ToolContext, idle: () => ToolState): Transition {
  return { next: placingState(landmark, idle), preview: commandAt(landmark, input, context), selected: landmark }
}

function placingState(landmark: string, idle: () => ToolState): ToolState {
  const state: ToolState = {
    id: 'landmark.placing',
    onPointerMove: (input, context) => ({ next: state, preview: commandAt(landmark, input, context) }),
    onPointerUp: (input, context) => ({ next: idle(), preview: null, command: commandAt(landmark, input, context), selected: landmark }),
    onKey: key => key === 'Escape' ? { next: idle(), preview: null } : { next: state },
    onCancel: () => ({ next: idle(), preview: null }),
  }
  return state
}

function commandAt(landmark: string, input: PointerInput, context: ToolContext): MarkingCommand | null {
  const { x, y } = clampToPicture(context.picture, input.at)
  return context.document.landmarks[landmark]
    ? moveLandmark(context.document, landmark, { x, y })
    : placeLandmark(context.document, landmark, { x, y })
}
