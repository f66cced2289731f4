import type { ImagePoint } from '#shared/geometry/point'
import type { ToolState } from '../tool'

/** The place of the picture that was taken stays under the pointer. Moving the view is no command. */
export function panning(grabbed: ImagePoint, idle: () => ToolState): ToolState {
  const state: ToolState = {
    id: 'pan.panning',
    onPointerMove: ({ at }) => ({ next: state, moveView: { x: at.x - grabbed.x, y: at.y - grabbed.y } }),
    onPointerUp: () => ({ next: idle() }),
    onKey: key => key === 'Escape' ? { next: idle() } : { next: state },
    onCancel: () => ({ next: idle() }),
  }
  return state
}
