import { panning } from './panning'
import type { ToolState } from '../tool'

/** Waiting for a press that takes the picture. */
export function panIdle(): ToolState {
  return {
    id: 'pan.idle',
    onPointerDown: ({ at }) => ({ next: panning(at, panIdle) }),
  }
}
