import { imagePoint } from '#shared/geometry/point'
import { moveLandmark } from '../../commands/move-landmark'
import { clampToPicture } from '../../viewport'
import type { PointerInput, ToolContext, ToolState, Transition } from '../tool'

/** Where the landmark was taken, beside its own middle: it must not jump under the pointer. */
interface Grip { readonly dx: number, readonly dy: number }

/** A marked landmark goes along with the pointer. A press without a move only selects it. */
export function dragging(landmark: string, input: PointerInput, context: ToolContext, idle: () => ToolState): Transition {
  const point = context.document.landmarks[landmark]
  if (!point) return { next: idle() }
  const grip = { dx: point.x - input.at.x, dy: point.y - input.at.y }
  return { next: draggingState(landmark, grip, idle), selected: landmark }
}

function draggingState(landmark: string, grip: Grip, idle: () => ToolState): ToolState {
  const commandAt = (input: PointerInput, context: ToolContext) => {
    const { x, y } = clampToPicture(context.picture, imagePoint(input.at.x + grip.dx, input.at.y + grip.dy))
    return moveLandmark(context.document, landmark, { x, y })
  }
  const state: ToolState = {
    id: 'landmark.dragging',
    onPointerMove: (input, context) => ({ next: state, preview: commandAt(input, context) }),
    onPointerUp: (input, context) => ({ next: idle(), preview: null, command: commandAt(input, context), selected: landmark }),
    onKey: key => key === 'Escape' ? { next: idle(), preview: null } : { next: state },
    onCancel: () => ({ next: idle(), preview: null }),
  }
  return state
}
