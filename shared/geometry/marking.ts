import type { Side, View } from './landmarks'

/** A place on the review copy in pixels (origin top left, x right, y down, fractions allowed). */
export interface MarkedPoint {
  readonly x: number
  readonly y: number
}

/** A placed landmark. `sd` is the click error per coordinate in pixels; given, it is final and no factor applies. */
export interface MarkedLandmark extends MarkedPoint {
  readonly sd?: number | undefined
}

/** A line on the picture known to hang true: a plumb bob, a door edge. */
export interface PlumbLine {
  readonly top: MarkedPoint
  readonly bottom: MarkedPoint
}

/** A length on the picture known in millimetres, lying in the person's own plane. */
export interface Scale {
  readonly from: MarkedPoint
  readonly to: MarkedPoint
  readonly lengthMm: number
}

export type Facing = 'left' | 'right'

/**
 * What the measures are computed from: the geometry of a marking together with the view and the picture size.
 * Landmark names are plain strings here because they come from outside; `checkMarking` refuses unknown ones by name.
 */
export interface MarkingBody {
  readonly view: View
  /** Size of the review copy in pixels. */
  readonly width: number
  readonly height: number
  readonly landmarks: Readonly<Record<string, MarkedLandmark>>
  /** Landmarks that cannot be seen, each with the reason. */
  readonly notVisible?: Readonly<Record<string, string>> | undefined
  /** Where the person faces in the picture (sagittal view). Without it the foot decides. */
  readonly facing?: Facing | undefined
  /** Near side (sagittal view). */
  readonly side?: Side | undefined
  /** The file shows the scene mirrored, as selfie cameras may store it. */
  readonly mirrored?: boolean | undefined
  /** Loose clothes: trochanter and iliac spines are less sure. */
  readonly clothed?: boolean | undefined
  /** Any body-weight or arm support was in use. */
  readonly supported?: boolean | undefined
  readonly plumbLine?: PlumbLine | null | undefined
  readonly scale?: Scale | null | undefined
}
