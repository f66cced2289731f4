import { moveScaleEnd } from '../../commands/move-scale-end'
import { setScale } from '../../commands/set-scale'
import type { LineKind } from '../line/line-kind'

/** The least length of a drawn scale in picture pixels; below it the length is mostly click error. */
export const LEAST_SCALE_PX = 20

/** A known length in the person's plane, such as a metre stick. */
export const SCALE_KIND: LineKind = {
  id: 'scale',
  read: document => document.scale && { first: document.scale.from, second: document.scale.to },
  refuse: ends => Math.hypot(ends.second.x - ends.first.x, ends.second.y - ends.first.y) < LEAST_SCALE_PX ? 'scale-too-short' : null,
  draw: (ends, context) => setScale(context.document, {
    from: { x: ends.first.x, y: ends.first.y },
    to: { x: ends.second.x, y: ends.second.y },
    lengthMm: context.document.scale?.lengthMm ?? context.scaleLengthMm,
  }),
  moveEnd: (end, to, context) => moveScaleEnd(context.document, end === 'first' ? 'from' : 'to', to),
}
