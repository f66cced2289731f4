import { hitLandmark } from './hit-landmark'
import { dragging } from './dragging'
import { placing } from './placing'
import { panning } from '../pan/panning'
import type { ToolState } from '../tool'

/** While something is to be placed, a marked landmark is taken only by its very ring: neighbours may lie close. */
const REACH_SHARE_BESIDE_TARGET = 0.5

/**
 * Waiting. A press on a marked landmark takes it, a press elsewhere begins to place the target;
 * without a target the picture itself is taken and moved.
 */
export function landmarkIdle(): ToolState {
  return {
    id: 'landmark.idle',
    onPointerDown(input, context) {
      const reach = context.target ? input.reach * REACH_SHARE_BESIDE_TARGET : input.reach
      const hit = hitLandmark(context.document, { ...input, reach })
      if (hit) return dragging(hit, input, context, landmarkIdle)
      if (context.target) return placing(context.target, input, context, landmarkIdle)
      return { next: panning(input.at, landmarkIdle), selected: null }
    },
  }
}
