/**
 * Healthy standing, cm in front of the ankle, mean ± SD. Source: Woodhull, Maltrud & Mello 1985, Alignment of the human
 * body in standing, Eur J Appl Physiol 54:109–115.
 */
export const WOODHULL_OFFSETS_CM = { knee: 3.8, hip: 6.2, shoulder: 3.8, ear: 5.9 } as const

/** Heights over the floor in cm of a person of 170 cm: a usual build, from memory, only to turn offsets into angles. */
export const STANCE_HEIGHTS_CM = { malleolus: 7, knee: 48, hip: 90, shoulder: 139, ear: 158 } as const
