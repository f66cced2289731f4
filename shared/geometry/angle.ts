declare const radiansBrand: unique symbol
declare const degreesBrand: unique symbol

/** An angle in radians. */
export type Radians = number & { readonly [radiansBrand]: 'radians' }
/** An angle in degrees. */
export type Degrees = number & { readonly [degreesBrand]: 'degrees' }

const DEGREES_PER_RADIAN = 180 / Math.PI

/** Marks a plain number of radians as such. */
export function radians(value: number): Radians {
  return value as Radians
}

/** Marks a plain number of degrees as such. */
export function degrees(value: number): Degrees {
  return value as Degrees
}

export function toDegrees(angle: Radians): Degrees {
  return degrees(angle * DEGREES_PER_RADIAN)
}

export function toRadians(angle: Degrees): Radians {
  return radians(angle / DEGREES_PER_RADIAN)
}

/** The same direction in (−180, 180]. */
export function wrapDegrees(angle: number): Degrees {
  const turned = angle % 360
  if (turned > 180) return degrees(turned - 360)
  if (turned <= -180) return degrees(turned + 360)
  return degrees(turned)
}
