import type { MarkedPoint } from '#shared/geometry/marking'
import type { ImagePoint } from '#shared/geometry/point'
import type { MarkingCommand } from '../../commands/marking-command'
import type { MarkingDocument } from '../../document'
import type { ToolContext, ToolNotice } from '../tool'

/** The two ends of a line on the picture. */
export interface LineEnds { readonly first: MarkedPoint, readonly second: MarkedPoint }

/** What tells the plumb line from the scale; the gesture is the same. */
export interface LineKind {
  readonly id: 'plumb-line' | 'scale'
  /** The line as it stands, or `null`. */
  readonly read: (document: MarkingDocument) => LineEnds | null
  /** Why these ends make no line, or `null` when they do. */
  readonly refuse: (ends: LineEnds, context: ToolContext) => ToolNotice | null
  readonly draw: (ends: LineEnds, context: ToolContext) => MarkingCommand | null
  readonly moveEnd: (end: keyof LineEnds, to: ImagePoint, context: ToolContext) => MarkingCommand | null
}
