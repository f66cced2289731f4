import type { ImagePoint } from '#shared/geometry/point'
import type { ToolState } from '../tool'
import { finishLine, previewTo } from './drawing'
import type { LineKind } from './line-kind'

/** One end is set by a click; the next click sets the other. */
export function anchored(kind: LineKind, start: ImagePoint, idle: () => ToolState): ToolState {
  const state: ToolState = {
    id: `${kind.id}.anchored`,
    onPointerDown: (input, context) => ({ next: state, preview: previewTo(kind, start, input, context) }),
    onPointerMove: (input, context) => ({ next: state, preview: previewTo(kind, start, input, context) }),
    onPointerUp: (input, context) => finishLine(kind, start, input, context, idle),
    onKey: key => key === 'Escape' ? { next: idle(), preview: null } : { next: state },
    onCancel: () => ({ next: idle(), preview: null }),
  }
  return state
}
