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
   * and each divisor (relative to itself).
   */
  readonly fragile: readonly Dual[]
}

const NONE: readonly Dual[] = []

function joined(a: readonly Dual[], b: readonly Dual[]): readonly Dual[] {
  if (b.length === 0) return a
  if (a.length === 0) return b
  return [...a, ...b]
}

/** The input number `index` of `count` inputs. */
export function inputDual(value: number, index: number, count: number): Dual {
  const gradient = new Array<number>(count).fill(0)
  gradient[index] = 1
  return { value, gradient, fragile: NONE }
}

/** wa · a + wb · b. */
export function combine(a: Dual, wa: number, b: Dual, wb: number): Dual {
  const gradient: number[] = []
  for (let i = 0; i < a.gradient.length; i++) {
    gradient.push(wa * (a.gradient[i] ?? 0) + wb * (b.gradient[i] ?? 0))
  }
  return { value: wa * a.value + wb * b.value, gradient, fragile: joined(a.fragile, b.fragile) }
}

export function add(a: Dual, b: Dual): Dual {
  return combine(a, 1, b, 1)
}

export function subtract(a: Dual, b: Dual): Dual {
  return combine(a, 1, b, -1)
}

export function scaleBy(a: Dual, factor: number): Dual {
  return { value: a.value * factor, gradient: a.gradient.map(part => part * factor), fragile: a.fragile }
}

export function multiply(a: Dual, b: Dual): Dual {
  const product = combine(a, b.value, b, a.value)
  return { value: a.value * b.value, gradient: product.gradient, fragile: product.fragile }
}

/** a / b. Not finite when b is 0: the caller withholds such a reading. */
export function divide(a: Dual, b: Dual): Dual {
  const value = a.value / b.value
  const slope = combine(a, 1 / b.value, b, -value / b.value)
  const relative: Dual = { value: 1, gradient: b.gradient.map(part => part / b.value), fragile: NONE }
  return { value, gradient: slope.gradient, fragile: [...slope.fragile, relative] }
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
  return { ...direction, fragile: [...slope.fragile, direction] }
}
