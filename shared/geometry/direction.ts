import { absolute, add, arctangent, combine, divide, type Dual, hypotenuse, scaleBy, subtract } from './dual'

/** A landmark after roll correction: pixels, x right, y down, with derivatives by the raw coordinates. */
export interface DualPoint {
  readonly x: Dual
  readonly y: Dual
}

/** +1 or −1: `s` (facing) in a sagittal view, `m` (view sign) in a frontal one. See MEASUREMENTS section 1. */
export type AxisSign = 1 | -1

/** The point half way between two landmarks. */
export function middle(a: DualPoint, b: DualPoint): DualPoint {
  return { x: combine(a.x, 0.5, b.x, 0.5), y: combine(a.y, 0.5, b.y, 0.5) }
}

/** Signed horizontal distance in pixels, + in the direction of `sign`. */
export function across(from: DualPoint, to: DualPoint, sign: AxisSign): Dual {
  return combine(to.x, sign, from.x, -sign)
}

/** Vertical distance in pixels, + when `to` lies above `from`. */
export function rise(from: DualPoint, to: DualPoint): Dual {
  return subtract(from.y, to.y)
}

/** Distance in pixels. */
export function span(a: DualPoint, b: DualPoint): Dual {
  return hypotenuse(subtract(b.x, a.x), subtract(b.y, a.y))
}

/** Horizontal distance in pixels without a sign. */
export function breadth(a: DualPoint, b: DualPoint): Dual {
  return absolute(subtract(b.x, a.x))
}

/** Angle of a line that rises, radians: 0 straight up, + leaning in the direction of `sign`. */
export function risingAngle(from: DualPoint, to: DualPoint, sign: AxisSign): Dual {
  return arctangent(across(from, to, sign), rise(from, to))
}

/** Angle of a line that hangs, radians: 0 straight down, + swinging in the direction of `sign`. */
export function hangingAngle(from: DualPoint, to: DualPoint, sign: AxisSign): Dual {
  return arctangent(across(from, to, sign), rise(to, from))
}

/** Angle of a line that runs in the direction of `sign`, radians: 0 level, + rising. */
export function pitchAngle(from: DualPoint, to: DualPoint, sign: AxisSign): Dual {
  return arctangent(rise(from, to), across(from, to, sign))
}

/** Leg length in pixels: trochanter to epicondyle plus epicondyle to malleolus. */
export function legLength(trochanter: DualPoint, epicondyle: DualPoint, malleolus: DualPoint): Dual {
  return add(span(trochanter, epicondyle), span(epicondyle, malleolus))
}

/** `part` in percent of `whole`. */
export function percentOf(part: Dual, whole: Dual): Dual {
  return scaleBy(divide(part, whole), 100)
}
