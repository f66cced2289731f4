import type { Side } from '#shared/geometry/landmarks'
import type { Facing, MarkedLandmark, PlumbLine, Scale } from '#shared/geometry/marking'

/**
 * What one person marked on one still: plain immutable JSON, the only truth of the bench.
 * Pictures of it (canvas, body map, table) are derived; it changes by commands alone.
 *
 * A landmark is in exactly one of three states: in `landmarks`, in `notVisible` (with the reason),
 * or in neither. The commands keep that so.
 *
 * Later parts get fields of their own beside these, each with its commands: `suggestions` (by landmark
 * name, with the origin and version of the model), `masks`, `notes`.
 */
export interface MarkingDocument {
  readonly landmarks: Readonly<Record<string, MarkedLandmark>>
  readonly notVisible: Readonly<Record<string, string>>
  /** `null` leaves it to the feet: from heel to fifth metatarsal. */
  readonly facing: Facing | null
  /** Side of the body nearest to the camera, sagittal views. */
  readonly side: Side | null
  /** The file shows left and right exchanged. */
  readonly mirrored: boolean
  /** Bony landmarks were marked through clothing, so their error is larger. */
  readonly clothed: boolean
  /** Body weight or arms were supported at that moment. */
  readonly supported: boolean
  readonly plumbLine: PlumbLine | null
  readonly scale: Scale | null
}

export const EMPTY_DOCUMENT: MarkingDocument = {
  landmarks: {},
  notVisible: {},
  facing: null,
  side: null,
  mirrored: false,
  clothed: false,
  supported: false,
  plumbLine: null,
  scale: null,
}

/** Why a landmark cannot be marked. `other` is for what has no word here. */
export const NOT_VISIBLE_REASONS = ['clothing', 'support', 'person', 'picture-edge', 'blurred', 'other'] as const
export type NotVisibleReason = typeof NOT_VISIBLE_REASONS[number]

/** State of one landmark: its point, the reason why it has none, or `null` when nobody looked yet. */
export type LandmarkState =
  | { readonly kind: 'marked', readonly point: MarkedLandmark }
  | { readonly kind: 'not-visible', readonly reason: string }
  | null

/** @returns the state of landmark `name`. */
export function landmarkState(document: MarkingDocument, name: string): LandmarkState {
  const point = document.landmarks[name]
  if (point) return { kind: 'marked', point }
  const reason = document.notVisible[name]
  return reason === undefined ? null : { kind: 'not-visible', reason }
}

function without<Value>(map: Readonly<Record<string, Value>>, key: string): Readonly<Record<string, Value>> {
  return Object.fromEntries(Object.entries(map).filter(([name]) => name !== key))
}

/** @returns a document in which landmark `name` is in `state` and nothing else differs. */
export function withLandmarkState(document: MarkingDocument, name: string, state: LandmarkState): MarkingDocument {
  const landmarks = without(document.landmarks, name)
  const notVisible = without(document.notVisible, name)
  if (state?.kind === 'marked') return { ...document, landmarks: { ...landmarks, [name]: state.point }, notVisible }
  if (state?.kind === 'not-visible') return { ...document, landmarks, notVisible: { ...notVisible, [name]: state.reason } }
  return { ...document, landmarks, notVisible }
}

/** @returns whether anything was marked: a document with defaults only is not worth a draft. */
export function isDocumentEmpty(document: MarkingDocument): boolean {
  return Object.keys(document.landmarks).length === 0
    && Object.keys(document.notVisible).length === 0
    && document.plumbLine === null
    && document.scale === null
}

/** JSON with the keys of every object in order, so that equal things give equal texts. */
function canonicalJson(value: unknown): string {
  return JSON.stringify(value, (_key, part: unknown) => typeof part === 'object' && part !== null && !Array.isArray(part)
    ? Object.fromEntries(Object.entries(part).sort(([a], [b]) => a < b ? -1 : 1))
    : part)
}

/** @returns whether two documents say the same, whatever the order in which things were marked or kept. */
export function isSameDocument(a: MarkingDocument, b: MarkingDocument): boolean {
  return a === b || canonicalJson(a) === canonicalJson(b)
}
