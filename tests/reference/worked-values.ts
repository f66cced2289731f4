import type { MarkingBody } from '#shared/geometry/marking'

/**
 * Worked examples of the measure definitions, each computed by hand calculator from the definition itself (not by this
 * project): points in pixels, y down, picture 1080 × 1080.
 */
export const WORKED_SAGITTAL: MarkingBody = {
  view: 'sagittal',
  width: 1080,
  height: 1080,
  facing: 'right',
  landmarks: {
    tragus: { x: 530, y: 150 },
    c7: { x: 480, y: 205 },
    acromion: { x: 500, y: 260 },
    greaterTrochanter: { x: 510, y: 520 },
    lateralEpicondyle: { x: 516, y: 760 },
    lateralMalleolus: { x: 500, y: 980 },
    heel: { x: 470, y: 1010 },
    fifthMetatarsal: { x: 600, y: 1010 },
    canthus: { x: 575, y: 140 },
  },
}

export const WORKED_SAGITTAL_READINGS: Readonly<Record<string, number>> = {
  trunkInclination: -2.2026,
  hipFlexion: -0.7705,
  kneeFlexion: 5.5917,
  ankleDorsiflexion: 4.1596,
  craniovertebralAngle: 47.7263,
  gazeAngle: 12.5288,
}

/** The same content turned by 3° clockwise on the screen, without a plumb line: only angles to the vertical follow. */
export const TURNED_BY_THREE: Readonly<Record<string, number>> = {
  trunkInclination: 0.7974,
  craniovertebralAngle: 44.7263,
  hipFlexion: -0.7705,
  kneeFlexion: 5.5917,
  ankleDorsiflexion: 4.1596,
}
