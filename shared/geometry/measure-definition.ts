import type { AxisSign, DualPoint } from './direction'
import type { Dual } from './dual'
import type { LandmarkId, Segment, Side, View } from './landmarks'
import type { Unit, WarningCode, WithheldReason } from './reading'
import type { TargetZone } from './target'

/** What every formula may know besides its landmarks. */
export interface Frame {
  /** `s`: +1 the person faces picture right, −1 left (sagittal view). */
  readonly facing: AxisSign
  /** `m`: +1 seen from the front, −1 from behind; a mirrored file flips it (frontal view). */
  readonly viewSign: AxisSign
  /** Turns a distance in pixels into millimetres. Only for recipes with `needsScale`. */
  readonly toMillimetres: (distancePx: Dual) => Dual
}

/** A line on the picture: each end is a landmark or the mean of several. Hue by segment. */
export interface MeasureLine {
  readonly from: readonly LandmarkId[]
  readonly to: readonly LandmarkId[]
  readonly segment: Segment
}

/**
 * One way to compute a measure from what is marked. A measure tries its recipes in order; the first whose landmarks
 * are all there, and whose scale is there if it needs one, gives the reading.
 */
export interface Recipe<K extends LandmarkId = LandmarkId> {
  readonly views: readonly View[]
  /** Set in a measure that comes once a side. */
  readonly side?: Side
  readonly landmarks: readonly K[]
  readonly unit: Unit
  readonly needsScale?: true
  /** The formula does not ask where the person faces (sagittal view). */
  readonly facingFree?: true
  /** Radians for `deg`, else the unit itself; from points that are already turned upright. */
  readonly compute: (at: (id: K) => DualPoint, frame: Frame) => Dual
  /** Lines that show it on the picture. */
  readonly lines: readonly MeasureLine[]
  /** Where its reading sits on the body map: the mean of these landmarks. */
  readonly shownAt: readonly LandmarkId[]
}

/** What the measure is relative to. `picture` angles use the vertical or horizontal, so that camera roll matters. */
export type Reference = 'vertical' | 'body'

/** How large a change must be before it can be called one while the clinic's own MDC95 is unknown (MEASUREMENTS section 4). */
export type ChangeFloor = Readonly<Partial<Record<Unit, number>>>

/** One measure: everything the bench, the table, the timeline, the exports and the help page need to know. */
export interface MeasureDefinition<Id extends string = string> {
  readonly id: Id
  /** Counts up when the formula changes. */
  readonly definitionVersion: number
  readonly reference: Reference
  /** It comes once a side. */
  readonly sided: boolean
  readonly recipes: readonly Recipe[]
  /** Judged against when the clinic has set nothing else; null: not judged. In the unit of the reading. */
  readonly defaultTarget: TargetZone | null
  /** Offered to a clinic that sets a target; never judged by itself. */
  readonly suggestedTarget: TargetZone | null
  /** No target status while the value stays under this size: healthy people differ by as much. */
  readonly judgedFrom: number
  readonly changeFloor: ChangeFloor
  /** Segments whose hues its swatch shows; a chart line takes the last one. */
  readonly segments: readonly Segment[]
  /** Set when support in use makes the measure meaningless. */
  readonly withheldWhen: WithheldReason | null
  /** Warnings that every reading of it carries. */
  readonly alwaysWarns: readonly WarningCode[]
  /** Where the definition, target or floor comes from. */
  readonly source: string
  readonly cautions: readonly MeasureCaution[]
}

/** Texts: `measure.cautions.<code>`. */
export type MeasureCaution =
  | 'acromion-for-shoulder'
  | 'age-dependent'
  | 'asymmetry-is-common'
  | 'camera-roll'
  | 'clearance-by-manual'
  | 'foot-flat'
  | 'geometry-not-load'
  | 'neutral-not-zero'
  | 'not-joint-range'
  | 'out-of-plane'
  | 'parallax'
  | 'scale-in-plane'
  | 'trunk-turn'

/** A recipe whose formula can only reach the landmarks it names. */
export function recipe<const K extends LandmarkId>(parts: Recipe<K>): Recipe {
  return parts
}

type Defaults = 'definitionVersion' | 'sided' | 'defaultTarget' | 'suggestedTarget' | 'judgedFrom' | 'withheldWhen' | 'alwaysWarns'
type Given<Id extends string> = Omit<MeasureDefinition<Id>, Defaults> & Partial<Pick<MeasureDefinition<Id>, Defaults>>

/** A definition with the usual values where nothing else is said: version 1, not sided, no target. */
export function defineMeasure<const Id extends string>(parts: Given<Id>): MeasureDefinition<Id> {
  return {
    definitionVersion: 1,
    sided: false,
    defaultTarget: null,
    suggestedTarget: null,
    judgedFrom: 0,
    withheldWhen: null,
    alwaysWarns: [],
    ...parts,
  }
}

/** Message keys of a measure, under `measure.<id>`. */
export function measureKeys(id: string): Readonly<Record<'name' | 'short' | 'formula' | 'zero' | 'positive' | 'negative', string>> {
  const base = `measure.${id}`
  return {
    name: `${base}.name`,
    short: `${base}.short`,
    formula: `${base}.formula`,
    zero: `${base}.zero`,
    positive: `${base}.positive`,
    negative: `${base}.negative`,
  }
}
