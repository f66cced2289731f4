import { imagePoint } from '#shared/geometry/point'
import { clampToPicture } from '../../viewport'
import type { PointerInput, ToolContext, ToolState, Transition } from '../tool'
import type { LineEnds, LineKind } from './line-kind'

/** One end of the line goes along with the pointer; let go too near to the other it goes back. */
export function draggingEnd(kind: LineKind, end: keyof LineEnds, input: PointerInput, context: ToolContext, idle: () => ToolState): Transition {
  const ends = kind.read(context.document)
  if (!ends) return { next: idle() }
  const grip = { dx: ends[end].x - input.at.x, dy: ends[end].y - input.at.y }
  const place = (now: PointerInput, seen: ToolContext) => clampToPicture(seen.picture, imagePoint(now.at.x + grip.dx, now.at.y + grip.dy))
  const state: ToolState = {
    id: `${kind.id}.dragging-end`,
    onPointerMove: (now, seen) => ({ next: state, preview: kind.moveEnd(end, place(now, seen), seen) }),
    onPointerUp(now, seen) {
      const to = place(now, seen)
      const standing = kind.read(seen.document)
      const notice = standing ? kind.refuse({ ...standing, [end]: to }, seen) : null
      if (notice) return { next: idle(), preview: null, notice }
      return { next: idle(), preview: null, command: kind.moveEnd(end, to, seen), selected: kind.id }
    },
    onKey: key => key === 'Escape' ? { next: idle(), preview: null } : { next: state },
    onCancel: () => ({ next: idle(), preview: null }),
  }
  return { next: state, selected: kind.id }
}
