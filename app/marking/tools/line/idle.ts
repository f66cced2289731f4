import { distance, imagePoint } from '#shared/geometry/point'
import { clampToPicture } from '../../viewport'
import type { PointerInput, ToolContext, ToolState } from '../tool'
import { drawing } from './drawing'
import { draggingEnd } from './dragging-end'
import type { LineEnds, LineKind } from './line-kind'

/** Waiting. A press on an end takes it, a press elsewhere begins a new line there. */
export function lineIdle(kind: LineKind): ToolState {
  const idle = () => lineIdle(kind)
  return {
    id: `${kind.id}.idle`,
    onPointerDown(input, context) {
      const end = hitEnd(kind, input, context)
      if (end) return draggingEnd(kind, end, input, context, idle)
      return { next: drawing(kind, clampToPicture(context.picture, input.at), idle), selected: kind.id }
    },
  }
}

function hitEnd(kind: LineKind, input: PointerInput, context: ToolContext): keyof LineEnds | null {
  const ends = kind.read(context.document)
  if (!ends) return null
  const away = (end: keyof LineEnds) => distance(input.at, imagePoint(ends[end].x, ends[end].y))
  const nearest = away('first') <= away('second') ? 'first' : 'second'
  return away(nearest) <= input.reach ? nearest : null
}
