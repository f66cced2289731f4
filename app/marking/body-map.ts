import type { LandmarkId, View } from '#shared/geometry/landmarks'
import type { Facing } from '#shared/geometry/marking'
import { findMeasure } from '#shared/geometry/registry'

/** The drawing board of the body map; the floor lies at 560. */
export const BODY_MAP = { width: 232, height: 580 } as const

interface MapPoint { readonly x: number, readonly y: number }

/** Where landmarks lie on the map of a person seen from the side who faces right. */
const SAGITTAL: Readonly<Record<string, MapPoint>> = {
  tragus: { x: 115.1, y: 69.5 },
  canthus: { x: 147.5, y: 65.3 },
  c7: { x: 82.3, y: 108.9 },
  acromion: { x: 102.3, y: 126.6 },
  elbow: { x: 108.1, y: 210.2 },
  wrist: { x: 171.5, y: 246.8 },
  axilla: { x: 97, y: 158 },
  lowerRib: { x: 84, y: 222 },
  greaterTrochanter: { x: 94.3, y: 279.1 },
  lateralEpicondyle: { x: 96.6, y: 409 },
  lateralMalleolus: { x: 92, y: 539.3 },
  heel: { x: 68.7, y: 555.8 },
  fifthMetatarsal: { x: 140.8, y: 555.8 },
  supportTop: { x: 74, y: 172 },
  armSupportTop: { x: 140, y: 262 },
  bodySupportBottom: { x: 118, y: 290 },
  thighTop: { x: 122, y: 314 },
}

/** Offsets from the middle of a person seen from the front, by name without its side. */
const FRONTAL: Readonly<Record<string, MapPoint>> = {
  tragus: { x: 31, y: 72 },
  acromion: { x: 42, y: 128 },
  elbow: { x: 60, y: 218 },
  asis: { x: 24, y: 260 },
  psis: { x: 12, y: 258 },
  kneeCentre: { x: 22.5, y: 409 },
  ankleCentre: { x: 22, y: 532 },
}

/** The measures that have their place on the map; the others stand in the list of readings. */
export const MAP_MEASURES: Readonly<Record<View, readonly string[]>> = {
  'sagittal': ['craniovertebralAngle', 'trunkInclination', 'hipFlexion', 'thighInclination', 'kneeFlexion', 'shankInclination', 'ankleDorsiflexion'],
  'frontal-anterior': ['headTilt', 'shoulderTilt', 'trunkLean', 'pelvicTilt', 'frontalKneeAngle', 'midlineShift'],
  'frontal-posterior': ['headTilt', 'shoulderTilt', 'trunkLean', 'pelvicTilt', 'midlineShift'],
}

function frontalPoint(id: string, isMirrorImage: boolean): MapPoint | null {
  const middle = BODY_MAP.width / 2
  if (id === 'sternalNotch') return { x: middle, y: 121 }
  const side = id.endsWith('Left') ? 1 : -1
  const offset = FRONTAL[id.replace(/(Left|Right)$/, '')]
  return offset ? { x: middle + offset.x * side * (isMirrorImage ? -1 : 1), y: offset.y } : null
}

/**
 * Where a landmark lies on the map, as the picture shows it: seen from the front the person's left is on the right.
 * @param facing of a sagittal view; nothing known is drawn facing right.
 * @param mirrored the file shows left and right exchanged.
 */
export function bodyMapPoint(view: View, id: string, facing: Facing | null, mirrored: boolean): MapPoint | null {
  if (view !== 'sagittal') return frontalPoint(id, (view === 'frontal-posterior') !== mirrored)
  const point = SAGITTAL[id]
  if (!point) return null
  return facing === 'left' ? { x: BODY_MAP.width - point.x, y: point.y } : point
}

/** Where a reading sits on the map: in the middle of the landmarks that its measure names. */
export function readingPoint(view: View, measure: string, side: string | undefined, facing: Facing | null, mirrored: boolean): MapPoint | null {
  const recipes = findMeasure(measure)?.recipes.filter(recipe => recipe.views.includes(view)) ?? []
  const recipe = recipes.find(candidate => candidate.side === side) ?? recipes[0]
  const points = (recipe?.shownAt ?? []).flatMap((id: LandmarkId) => bodyMapPoint(view, id, facing, mirrored) ?? [])
  if (points.length === 0) return null
  const mean = (axis: 'x' | 'y') => points.reduce((sum, point) => sum + point[axis], 0) / points.length
  return { x: mean('x'), y: mean('y') }
}

export interface LabelWish { readonly y: number, readonly height: number }

/**
 * Middles for labels that would like to sit at `y`, moved apart as little as needed so that none covers another.
 * @param extent labels stay between 0 and it as far as they fit.
 * @returns one middle a label, in the order given.
 */
export function spreadLabels(wishes: readonly LabelWish[], extent: number): readonly number[] {
  const order = wishes.map((wish, index) => ({ ...wish, index })).sort((a, b) => a.y - b.y || a.index - b.index)
  let edge = 0
  const tops = order.map(({ y, height }) => {
    const top = Math.max(edge, y - height / 2)
    edge = top + height
    return top
  })
  let floor = extent
  for (let index = order.length - 1; index >= 0; index--) {
    const height = order[index]?.height ?? 0
    tops[index] = Math.max(0, Math.min(tops[index] ?? 0, floor - height))
    floor = tops[index] ?? 0
  }
  const middles = new Map(order.map((label, index) => [label.index, (tops[index] ?? 0) + label.height / 2]))
  return wishes.map((_wish, index) => middles.get(index) ?? 0)
}
