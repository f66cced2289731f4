import type { ImagePoint } from '#shared/geometry/point'
import type { MarkingCommand } from '../commands/marking-command'
import type { MarkingDocument } from '../document'
import type { Size } from '../viewport'

/** A pointer on the picture: mouse, pen or finger. */
export interface PointerInput {
  readonly at: ImagePoint
  /** How far from a mark still counts as on it, in picture pixels: the target size at the present zoom. */
  readonly reach: number
  /** The same while something else is about to be placed: the very ring of a mark, whatever points at it. */
  readonly tightReach: number
}

/** What a tool may look at. It changes nothing itself. */
export interface ToolContext {
  readonly document: MarkingDocument
  readonly picture: Size
  /** The landmark that a press on a free place sets: the next of the guide or the one that was asked for. */
  readonly target: string | null
  /** A marked landmark that was gone to by name, to be moved: it is taken before anything is placed. */
  readonly chosen: string | null
  /** Length that a newly drawn scale is given, mm. */
  readonly scaleLengthMm: number
}

/** Why a gesture came to nothing; the bench has a sentence for each. */
export type ToolNotice = 'plumb-line-too-short' | 'scale-too-short'

/**
 * What follows from an event. `preview` is the command that letting go now would make: it is drawn and measured,
 * not done. `command` is to be done, once. `selected` is the mark that the gesture is about.
 * `moveView` shifts the picture under the pointer, in picture pixels.
 */
export interface Transition {
  readonly next: ToolState
  readonly preview?: MarkingCommand | null
  readonly command?: MarkingCommand | null
  readonly selected?: string | null
  readonly notice?: ToolNotice
  readonly moveView?: { readonly x: number, readonly y: number }
}

export type ToolHandler = (input: PointerInput, context: ToolContext) => Transition

/** One state of a tool: no timers, no DOM, no requests. A missing handler means that the event changes nothing. */
export interface ToolState {
  readonly id: string
  readonly onPointerDown?: ToolHandler
  readonly onPointerMove?: ToolHandler
  readonly onPointerUp?: ToolHandler
  readonly onKey?: (key: string, context: ToolContext) => Transition
  /** Escape, lost pointer, tool change, leaving the frame: the document stays as it was before the gesture. */
  readonly onCancel?: () => Transition
}

export type ToolId = 'landmark' | 'plumb-line' | 'scale' | 'pan'
