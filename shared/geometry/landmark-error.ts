import type { Landmark, LandmarkId } from './landmarks'

/** Click error per coordinate of an easy point on a picture of the reference height, in pixels (a design choice of ours). */
export const CLICK_SD_PX = 3
/** Picture height to which `CLICK_SD_PX` and a clinic's own values refer. */
export const REFERENCE_HEIGHT_PX = 1080
/** Repeated markings from which a clinic's own value replaces the default. */
export const REPEATED_MARKINGS_NEEDED = 10

/** How well a clinic repeats one landmark, from its own repeated markings. */
export interface LandmarkRepeatability {
  /** Sd per coordinate in pixels of a picture 1080 high. */
  readonly sdPx: number
  /** Repeated markings behind it. */
  readonly markings: number
}

export type Repeatability = Readonly<Partial<Record<LandmarkId, LandmarkRepeatability>>>

/** Click error of an easy point (plumb line, scale) per coordinate, in pixels of this picture. */
export function clickSd(pictureHeight: number): number {
  return CLICK_SD_PX * pictureHeight / REFERENCE_HEIGHT_PX
}

/**
 * Sd per coordinate of a landmark that carries none of its own, in pixels of this picture: the clinic's repeatability
 * once it rests on enough markings, else the default times the landmark's factor (larger through clothes).
 */
export function landmarkSd(landmark: Landmark, pictureHeight: number, clothed: boolean, repeatability: Repeatability): number {
  const own = repeatability[landmark.id]
  if (own && own.markings >= REPEATED_MARKINGS_NEEDED) return own.sdPx * pictureHeight / REFERENCE_HEIGHT_PX
  return clickSd(pictureHeight) * (clothed ? landmark.clothedSpread : landmark.spread)
}
