/** The camera's view of the person. */
export type View = 'sagittal' | 'frontal-anterior' | 'frontal-posterior'
/** Anatomical side of the person. */
export type Side = 'left' | 'right'
/** Colour family: the same body part has the same hue on the still, in the table and on the chart. */
export type Segment = 'trunk' | 'thigh' | 'shank' | 'head' | 'arm' | 'foot' | 'equipment'

export const VIEWS = ['sagittal', 'frontal-anterior', 'frontal-posterior'] as const satisfies readonly View[]

const FRONTAL = ['frontal-anterior', 'frontal-posterior'] as const
const SAGITTAL = ['sagittal'] as const
const ANTERIOR = ['frontal-anterior'] as const
const POSTERIOR = ['frontal-posterior'] as const

/**
 * Every landmark, in guided order within its view: the core set first, then the rest (MEASUREMENTS section 2).
 * `guided` lists the views whose guide offers the landmark, `views` those in which it is accepted: the notch is
 * estimated, not seen, from behind. `spread` is the factor on the default click error (section 4); `clothedSpread` replaces it
 * on a clothed person.
 */
const CATALOGUE = [
  { id: 'acromion', views: SAGITTAL, core: true, segment: 'trunk', spread: 1.3 },
  { id: 'greaterTrochanter', views: SAGITTAL, core: true, segment: 'trunk', spread: 1.5, clothedSpread: 2.5 },
  { id: 'lateralEpicondyle', views: SAGITTAL, core: true, segment: 'thigh', spread: 1.3 },
  { id: 'lateralMalleolus', views: SAGITTAL, core: true, segment: 'shank' },
  { id: 'fifthMetatarsal', views: SAGITTAL, core: true, segment: 'foot' },
  { id: 'heel', views: SAGITTAL, segment: 'foot' },
  { id: 'tragus', views: SAGITTAL, segment: 'head' },
  { id: 'c7', views: SAGITTAL, segment: 'head' },
  { id: 'canthus', views: SAGITTAL, segment: 'head' },
  { id: 'elbow', views: SAGITTAL, segment: 'arm' },
  { id: 'wrist', views: SAGITTAL, segment: 'arm' },
  { id: 'axilla', views: SAGITTAL, segment: 'trunk' },
  { id: 'lowerRib', views: SAGITTAL, segment: 'trunk' },
  { id: 'supportTop', views: SAGITTAL, segment: 'equipment', equipment: true },
  { id: 'armSupportTop', views: SAGITTAL, segment: 'equipment', equipment: true },
  { id: 'bodySupportBottom', views: SAGITTAL, segment: 'equipment', equipment: true },
  { id: 'thighTop', views: SAGITTAL, segment: 'thigh', equipment: true },

  { id: 'acromionLeft', views: FRONTAL, core: true, segment: 'trunk', side: 'left', spread: 1.3 },
  { id: 'acromionRight', views: FRONTAL, core: true, segment: 'trunk', side: 'right', spread: 1.3 },
  { id: 'asisLeft', views: ANTERIOR, core: true, segment: 'trunk', side: 'left', spread: 1.5, clothedSpread: 2.5 },
  { id: 'asisRight', views: ANTERIOR, core: true, segment: 'trunk', side: 'right', spread: 1.5, clothedSpread: 2.5 },
  { id: 'psisLeft', views: POSTERIOR, core: true, segment: 'trunk', side: 'left', spread: 1.5, clothedSpread: 2.5 },
  { id: 'psisRight', views: POSTERIOR, core: true, segment: 'trunk', side: 'right', spread: 1.5, clothedSpread: 2.5 },
  { id: 'ankleCentreLeft', views: FRONTAL, core: true, segment: 'shank', side: 'left' },
  { id: 'ankleCentreRight', views: FRONTAL, core: true, segment: 'shank', side: 'right' },
  { id: 'sternalNotch', views: FRONTAL, guided: ANTERIOR, core: true, segment: 'trunk' },
  { id: 'kneeCentreLeft', views: FRONTAL, segment: 'thigh', side: 'left' },
  { id: 'kneeCentreRight', views: FRONTAL, segment: 'thigh', side: 'right' },
  { id: 'tragusLeft', views: FRONTAL, segment: 'head', side: 'left' },
  { id: 'tragusRight', views: FRONTAL, segment: 'head', side: 'right' },
  { id: 'elbowLeft', views: FRONTAL, segment: 'arm', side: 'left' },
  { id: 'elbowRight', views: FRONTAL, segment: 'arm', side: 'right' },
] as const satisfies readonly CatalogueEntry[]

interface CatalogueEntry {
  readonly id: string
  readonly views: readonly View[]
  readonly guided?: readonly View[]
  readonly core?: true
  readonly segment: Segment
  readonly side?: Side
  readonly spread?: number
  readonly clothedSpread?: number
  readonly equipment?: true
}

export type LandmarkId = (typeof CATALOGUE)[number]['id']

/** One landmark of the catalogue, with the message keys of its name and its palpation or sighting hint. */
export interface Landmark {
  readonly id: LandmarkId
  /** Views in which a marking may hold it. */
  readonly views: readonly View[]
  /** Views whose guide offers it. */
  readonly guided: readonly View[]
  /** Placed first; the others are folded away. */
  readonly core: boolean
  readonly segment: Segment
  /** Anatomical side, for landmarks that exist left and right in one picture. */
  readonly side: Side | null
  /** Factor on the default click error. */
  readonly spread: number
  /** Factor used instead when the marking says `clothed`. */
  readonly clothedSpread: number
  /** A point of the support equipment or of the seat, not of the body's alignment: it may lie on a body landmark. */
  readonly equipment: boolean
  readonly nameKey: string
  readonly hintKey: string
}

function toLandmark(entry: CatalogueEntry & { readonly id: LandmarkId }): Landmark {
  const spread = entry.spread ?? 1
  return {
    id: entry.id,
    views: entry.views,
    guided: entry.guided ?? entry.views,
    core: entry.core ?? false,
    segment: entry.segment,
    side: entry.side ?? null,
    spread,
    clothedSpread: entry.clothedSpread ?? spread,
    equipment: entry.equipment ?? false,
    nameKey: `landmark.${entry.id}.name`,
    hintKey: `landmark.${entry.id}.hint`,
  }
}

/** All landmarks in guided order. */
export const LANDMARKS: readonly Landmark[] = CATALOGUE.map(toLandmark)

const BY_ID: ReadonlyMap<string, Landmark> = new Map(LANDMARKS.map(landmark => [landmark.id, landmark]))

/** The landmark of that name, or null when there is none. */
export function findLandmark(name: string): Landmark | null {
  return BY_ID.get(name) ?? null
}

/** Whether the name is one of the catalogue's. */
export function isLandmarkId(name: string): name is LandmarkId {
  return BY_ID.has(name)
}

const GUIDED: Readonly<Record<View, readonly Landmark[]>> = {
  'sagittal': LANDMARKS.filter(landmark => landmark.guided.includes('sagittal')),
  'frontal-anterior': LANDMARKS.filter(landmark => landmark.guided.includes('frontal-anterior')),
  'frontal-posterior': LANDMARKS.filter(landmark => landmark.guided.includes('frontal-posterior')),
}

/** The landmarks that the guide of a view offers, in the order in which they are placed: core set first. */
export function guidedLandmarks(view: View): readonly Landmark[] {
  return GUIDED[view]
}
