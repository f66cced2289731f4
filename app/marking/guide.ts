import { guidedLandmarks } from '#shared/geometry/landmarks'
import type { Landmark, View } from '#shared/geometry/landmarks'
import { measuresOf } from '#shared/geometry/registry'
import { landmarkState } from './document'
import type { MarkingDocument } from './document'

/** The sets that the guide asks for one after the other; the later ones are folded away at first. */
export const GUIDE_SETS = ['core', 'more', 'equipment'] as const
export type GuideSet = typeof GUIDE_SETS[number]

/**
 * The landmarks of a view by set: those that nearly every reading needs, the rest of the body, the support.
 * `unasked` are those that no measure needs: they can be marked from the list and are never asked for.
 */
export type GuideOrder = Readonly<Record<GuideSet | 'unasked', readonly Landmark[]>>

/**
 * The guide asks for nothing that gives nothing: beyond the core set, only landmarks that a measure of this view needs.
 * @returns the landmarks of a view by set, in guided order.
 */
export function guideOrder(view: View): GuideOrder {
  const needed = new Set<string>(measuresOf(view).flatMap(measure => measure.recipes).flatMap(recipe => recipe.landmarks))
  const isAsked = (landmark: Landmark) => landmark.core || needed.has(landmark.id)
  const offered = guidedLandmarks(view).filter(isAsked)
  return {
    unasked: guidedLandmarks(view).filter(landmark => !isAsked(landmark)),
    core: offered.filter(landmark => landmark.core),
    more: offered.filter(landmark => !landmark.core && !landmark.equipment),
    equipment: offered.filter(landmark => !landmark.core && landmark.equipment),
  }
}

/** Where the person is in the guide. All of it is about the bench, not about the marking. */
export interface GuidePlace {
  /** How far the guide goes: to the end of this set. */
  readonly upTo: GuideSet
  /** Passed over for now; asked for again when nothing else is left. */
  readonly skipped: readonly string[]
}

function asked(order: GuideOrder, upTo: GuideSet): readonly Landmark[] {
  return GUIDE_SETS.slice(0, GUIDE_SETS.indexOf(upTo) + 1).flatMap(set => order[set])
}

/** @returns the landmark to place next, or `null` when every one that is asked for is marked or said to be not visible. */
export function nextLandmark(document: MarkingDocument, order: GuideOrder, place: GuidePlace): Landmark | null {
  const open = asked(order, place.upTo).filter(landmark => landmarkState(document, landmark.id) === null)
  return open.find(landmark => !place.skipped.includes(landmark.id)) ?? open[0] ?? null
}

/** @returns the landmark that the guide asks for after `id`, or `null` when that is the last open one. */
export function landmarkAfter(document: MarkingDocument, order: GuideOrder, place: GuidePlace, id: string): Landmark | null {
  const withIt: MarkingDocument = { ...document, landmarks: { ...document.landmarks, [id]: { x: 0, y: 0 } } }
  return nextLandmark(withIt, order, place)
}

/** @returns the next set beyond `upTo` in which a landmark is still undecided, or `null` when there is none. */
export function nextOpenSet(document: MarkingDocument, order: GuideOrder, upTo: GuideSet): GuideSet | null {
  const later = GUIDE_SETS.slice(GUIDE_SETS.indexOf(upTo) + 1)
  return later.find(set => order[set].some(landmark => landmarkState(document, landmark.id) === null)) ?? null
}

export interface GuideProgress {
  readonly marked: number
  readonly notVisible: number
  readonly total: number
  /** 1-based place of the next landmark in the whole order, or `null` when none is left. */
  readonly position: number | null
  readonly isCoreDone: boolean
}

/** How far the marking is: counts over what is asked for now. */
export function guideProgress(document: MarkingDocument, order: GuideOrder, place: GuidePlace): GuideProgress {
  const list = asked(order, place.upTo)
  const states = list.map(landmark => landmarkState(document, landmark.id)?.kind)
  const next = nextLandmark(document, order, place)
  return {
    marked: states.filter(kind => kind === 'marked').length,
    notVisible: states.filter(kind => kind === 'not-visible').length,
    total: list.length,
    position: next ? list.indexOf(next) + 1 : null,
    isCoreDone: order.core.every(landmark => landmarkState(document, landmark.id) !== null),
  }
}

/** @returns the measures of the view that marking landmark `id` would complete: all their other landmarks are marked. */
export function completedBy(document: MarkingDocument, view: View, id: string): readonly string[] {
  const has = (name: string) => document.landmarks[name] !== undefined
  return measuresOf(view)
    .filter(measure => !(measure.withheldWhen === 'supported' && document.supported))
    .filter(measure => measure.recipes.some(recipe =>
      recipe.views.includes(view)
      && recipe.landmarks.some(name => name === id)
      && (!recipe.needsScale || document.scale !== null)
      && recipe.landmarks.every(name => name === id || has(name))))
    .map(measure => measure.id)
}
