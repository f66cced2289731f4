import { hitLandmark } from './hit-landmark'
import { dragging } from './dragging'
import { placing } from './placing'
import { panning } from '../pan/panning'
import type { PointerInput, ToolContext, ToolState } from '../tool'

/** The landmark that a press takes: with something to place, neighbours that lie close must not be in the way. */
function taken(input: PointerInput, context: ToolContext): string | null {
  const near = hitLandmark(context.document, input)
  if (!context.target || near === null || near === context.chosen) return near
  return hitLandmark(context.document, { ...input, reach: input.tightReach })
}

/**
 * Waiting. A press on a marked landmark takes it, a press elsewhere begins to place the target;
 * without a target the picture itself is taken and moved.
 */
export function landmarkIdle(): ToolState {
  return {
    id: 'landmark.idle',
    onPointerDown(input, context) {
      const hit = taken(input, context)
      if (hit) return dragging(hit, input, context, landmarkIdle)
      if (context.target) return placing(context.target, input, context, landmarkIdle)
      return { next: panning(input.at, landmarkIdle), selected: null }
    },
  }
}
