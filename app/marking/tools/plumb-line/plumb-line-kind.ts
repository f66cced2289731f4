import { SHORTEST_PLUMB_LINE } from '#shared/geometry/plumb-line'
import { movePlumbLineEnd } from '../../commands/move-plumb-line-end'
import { setPlumbLine } from '../../commands/set-plumb-line'
import type { LineEnds, LineKind } from '../line/line-kind'

function sorted(ends: LineEnds) {
  const [top, bottom] = ends.first.y <= ends.second.y ? [ends.first, ends.second] : [ends.second, ends.first]
  return { top: { x: top.x, y: top.y }, bottom: { x: bottom.x, y: bottom.y } }
}

/** The vertical of the room: a hanging line, a door edge. Drawn in either direction, kept with its upper end as `top`. */
export const PLUMB_LINE_KIND: LineKind = {
  id: 'plumb-line',
  read: document => document.plumbLine && { first: document.plumbLine.top, second: document.plumbLine.bottom },
  refuse: (ends, context) =>
    Math.hypot(ends.second.x - ends.first.x, ends.second.y - ends.first.y) < context.picture.height * SHORTEST_PLUMB_LINE
      ? 'plumb-line-too-short'
      : null,
  draw: (ends, context) => setPlumbLine(context.document, sorted(ends)),
  moveEnd: (end, to, context) => movePlumbLineEnd(context.document, end === 'first' ? 'top' : 'bottom', to),
}
