import { movePlumbLineEnd } from '../../commands/move-plumb-line-end'
import { setPlumbLine } from '../../commands/set-plumb-line'
import type { LineEnds, LineKind } from '../line/line-kind'

/** The least length of a plumb line as a share of the picture's height: a shorter one knows less than a level camera. */
export const LEAST_PLUMB_LINE_SHARE = 1 / 3

function sorted(ends: LineEnds) {
  const [top, bottom] = ends.first.y <= ends.second.y ? [ends.first, ends.second] : [ends.second, ends.first]
  return { top: { x: top.x, y: top.y }, bottom: { x: bottom.x, y: bottom.y } }
}

/** The vertical of the room: a hanging line, a door edge. Drawn in either direction, kept with its upper end as `top`. */
export const PLUMB_LINE_KIND: LineKind = {
  id: 'plumb-line',
  read: document => document.plumbLine && { first: document.plumbLine.top, second: document.plumbLine.bottom },
  refuse: (ends, context) =>
    Math.hypot(ends.second.x - ends.first.x, ends.second.y - ends.first.y) < context.picture.height * LEAST_PLUMB_LINE_SHARE
      ? 'plumb-line-too-short'
      : null,
  draw: (ends, context) => setPlumbLine(context.document, sorted(ends)),
  moveEnd: (end, to, context) => movePlumbLineEnd(context.document, end === 'first' ? 'top' : 'bottom', to),
}
