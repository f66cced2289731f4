import { distance } from '#shared/geometry/point'
import type { ImagePoint } from '#shared/geometry/point'
import { clampToPicture } from '../../viewport'
import type { PointerInput, ToolContext, ToolState, Transition } from '../tool'
import { anchored } from './anchored'
import type { LineKind } from './line-kind'

/** The line runs from where the press was to the pointer. A press let go on the spot waits for a second press. */
export function drawing(kind: LineKind, start: ImagePoint, idle: () => ToolState): ToolState {
  const state: ToolState = {
    id: `${kind.id}.drawing`,
    onPointerMove: (input, context) => ({ next: state, preview: previewTo(kind, start, input, context) }),
    onPointerUp(input, context) {
      if (distance(start, input.at) <= input.reach) return { next: anchored(kind, start, idle) }
      return finishLine(kind, start, input, context, idle)
    },
    onKey: key => key === 'Escape' ? { next: idle(), preview: null } : { next: state },
    onCancel: () => ({ next: idle(), preview: null }),
  }
  return state
}

/** The line as it would be now, drawn even while it is still too short. */
export function previewTo(kind: LineKind, start: ImagePoint, input: PointerInput, context: ToolContext) {
  return kind.draw({ first: start, second: clampToPicture(context.picture, input.at) }, context)
}

/** Ends the gesture: one command, or a notice why there is none. */
export function finishLine(kind: LineKind, start: ImagePoint, input: PointerInput, context: ToolContext, idle: () => ToolState): Transition {
  const ends = { first: start, second: clampToPicture(context.picture, input.at) }
  const notice = kind.refuse(ends, context)
  if (notice) return { next: idle(), preview: null, notice }
  return { next: idle(), preview: null, command: kind.draw(ends, context), selected: kind.id }
}
