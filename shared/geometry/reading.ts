import type { LandmarkId, Side, View } from './landmarks'

/** UCUM codes, as the exports need them: degrees, millimetres, percent, and `1` for a plain ratio. */
export type Unit = 'deg' | 'mm' | '%' | '1'

export type TargetStatus = 'within' | 'outside' | 'unclear'

/** Something a person must know before trusting the number. Texts: `measure.warnings.<code>`. */
export type WarningCode =
  | 'assumes-both-legs-alike'
  | 'facing-mismatch'
  | 'large-roll'
  | 'left-right-swapped'
  | 'maybe-mirrored'
  | 'no-plumb-line'
  | 'scale-too-short'
  | 'segment-too-short'

/** Why a measure of this view gives no reading. Texts: `measure.withheld.<code>`. */
export type WithheldReason = 'missing-landmarks' | 'needs-scale' | 'supported' | 'degenerate'

/** One value computed from a marking. `sd`, `low` and `high` are in `unit`; `low` and `high` bound 95 % (value ± 1.96 sd). */
export interface Reading {
  readonly measure: string
  readonly definitionVersion: number
  readonly view: View
  /** The side of a sided measure; in a sagittal view the near side when it was stated. */
  readonly side?: Side
  readonly value: number
  readonly unit: Unit
  readonly sd: number
  readonly low: number
  readonly high: number
  /** Absent where the measure has no target. */
  readonly targetStatus?: TargetStatus
  readonly warnings: readonly WarningCode[]
}

/** A measure of this view that gave no reading, and why. */
export interface WithheldReading {
  readonly measure: string
  readonly side?: Side
  readonly reason: WithheldReason
  /** Landmarks to place for it; empty for other reasons. */
  readonly missing: readonly LandmarkId[]
}
