/**
 * A value together with its first derivatives by every input of one measure (a dual number with several parts).
 * One mechanism gives every error band: whatever a formula does to shared landmarks, mid-points, ratios or the scale,
 * its gradient comes out by the chain rule. Source: forward-mode differentiation, e.g. Griewank & Walther,
 * Evaluating Derivatives, ch. 3.
 */
export interface Dual {
  readonly value: number
  /** Derivative by each input, in the order of the inputs. */
  readonly gradient: readonly number[]
  /**
   * Parts of the formula whose own sd must stay small for the linear band to be honest: each direction (radians)
   * and each divisor (relative to itself, weighted).
   */
  readonly fragile: readonly Dual[]
}

const NONE: readonly Dual[] = []

/** A divisor bends the distribution twice as soon as a direction does (Monte Carlo test), so it counts double. */
export const DIVISOR_WEIGHT = 2

function joined(a: readonly Dual[], b: readonly Dual[]): readonly Dual[] {
  if (b.length === 0) return a
  if (a.length === 0) return b
  return [...a, ...b]
}

function unitGradient(index: number, count: number): readonly number[] {
  const gradient = new Array<number>(count).fill(0)
  gradient[index] = 1
  return gradient
}

const MOST_INPUTS = 16
/** Unit gradients by count and index: the same few serve every body, so they are made once. */
const UNIT_GRADIENTS: readonly (readonly (readonly number[])[])[] = Array.from({ length: MOST_INPUTS + 1 }, (_, count) =>
  Array.from({ length: count }, (_, index) => unitGradient(index, count)))

/** Input number `index` of `count` inputs. */
export function inputDual(value: number, index: number, count: number): Dual {
  return { value, gradient: UNIT_GRADIENTS[count]?.[index] ?? unitGradient(index, count), fragile: NONE }
}

function scaled(gradient: readonly number[], factor: number): readonly number[] {
  const result = new Array<number>(gradient.length)
  for (let i = 0; i < gradient.length; i++) result[i] = factor * (gradient[i] ?? 0)
  return result
}

/** wa · a + wb · b. */
export function combine(a: Dual, wa: number, b: Dual, wb: number): Dual {
  const count = a.gradient.length
  const gradient = new Array<number>(count)
  for (let i = 0; i < count; i++) gradient[i] = wa * (a.gradient[i] ?? 0) + wb * (b.gradient[i] ?? 0)
  return { value: wa * a.value + wb * b.value, gradient, fragile: joined(a.fragile, b.fragile) }
}

export function add(a: Dual, b: Dual): Dual {
  return combine(a, 1, b, 1)
}

export function subtract(a: Dual, b: Dual): Dual {
  return combine(a, 1, b, -1)
}

export function scaleBy(a: Dual, factor: number): Dual {
  return { value: a.value * factor, gradient: scaled(a.gradient, factor), fragile: a.fragile }
}

export function multiply(a: Dual, b: Dual): Dual {
  const product = combine(a, b.value, b, a.value)
  return { value: a.value * b.value, gradient: product.gradient, fragile: product.fragile }
}

/** a / b. Not finite when b is 0: the caller withholds such a reading. */
export function divide(a: Dual, b: Dual): Dual {
  const value = a.value / b.value
  const slope = combine(a, 1 / b.value, b, -value / b.value)
  const relative: Dual = { value: 1, gradient: scaled(b.gradient, DIVISOR_WEIGHT / b.value), fragile: NONE }
  return { value, gradient: slope.gradient, fragile: joined(slope.fragile, [relative]) }
}

export function absolute(a: Dual): Dual {
  return a.value < 0 ? scaleBy(a, -1) : a
}

/** √(a² + b²). Its gradient is not finite when both are 0. */
export function hypotenuse(a: Dual, b: Dual): Dual {
  const value = Math.hypot(a.value, b.value)
  const slope = combine(a, a.value / value, b, b.value / value)
  return { value, gradient: slope.gradient, fragile: slope.fragile }
}

/** atan2(y, x) in radians. Its gradient is not finite when both are 0. */
export function arctangent(y: Dual, x: Dual): Dual {
  const square = x.value * x.value + y.value * y.value
  const slope = combine(y, x.value / square, x, -y.value / square)
  const direction: Dual = { value: Math.atan2(y.value, x.value), gradient: slope.gradient, fragile: NONE }
  return { value: direction.value, gradient: direction.gradient, fragile: joined(slope.fragile, [direction]) }
}
