import { wrapDegrees } from './angle'
import { Z95 } from './error-band'
import type { Reading } from './reading'
import { findMeasure } from './registry'

/** Difference of body-weight support, in points of percent of body mass, up to which two readings count as alike. */
export const LIKE_SUPPORT_POINTS = 10

/** Texts: `measure.warnings.<code>`. */
export type ChangeWarning = 'support-differs' | 'view-differs'

/** What is known about two readings besides themselves. */
export interface ChangeContext {
  /** The clinic's MDC95 of this measure in the unit of the readings; null until it is known. */
  readonly mdc95: number | null
  /** Body-weight support in percent at either reading; null when it was not logged. */
  readonly supportBefore: number | null
  readonly supportAfter: number | null
}

/** A change between two readings of one measure, in their unit. */
export interface ReadingChange {
  /** After less before; an angle the short way round. */
  readonly change: number
  readonly sd: number
  /** What the change must exceed. */
  readonly threshold: number
  readonly mdc95: number | null
  readonly largerThanError: boolean
  readonly warnings: readonly ChangeWarning[]
}

/** Whether support was alike enough for a comparison or for a line on the chart. Unknown support is taken as alike. */
export function isLikeSupport(before: number | null, after: number | null): boolean {
  return before === null || after === null || Math.abs(after - before) <= LIKE_SUPPORT_POINTS
}

/**
 * What a change must exceed to be larger than measurement error: the greater of 1.96 · √(sd₁² + sd₂²) and the clinic's
 * MDC95, or until that is known the floor of the measure.
 */
export function changeThreshold(sdBefore: number, sdAfter: number, mdc95: number | null, floor: number): number {
  return Math.max(Z95 * Math.hypot(sdBefore, sdAfter), mdc95 ?? floor)
}

/**
 * The change between two readings and whether it is larger than measurement error.
 * @returns null when they cannot be compared: another measure, side, unit or definition version.
 */
export function compareReadings(before: Reading, after: Reading, context: ChangeContext): ReadingChange | null {
  const definition = findMeasure(before.measure)
  const isSame = before.measure === after.measure && before.side === after.side
    && before.unit === after.unit && before.definitionVersion === after.definitionVersion
  if (!definition || !isSame) return null
  const difference = after.value - before.value
  const change = (before.unit === 'deg' ? wrapDegrees(difference) : difference) + 0
  const threshold = changeThreshold(before.sd, after.sd, context.mdc95, definition.changeFloor[before.unit] ?? 0)
  const warnings: ChangeWarning[] = []
  if (!isLikeSupport(context.supportBefore, context.supportAfter)) warnings.push('support-differs')
  if (before.view !== after.view) warnings.push('view-differs')
  return {
    change,
    sd: Math.hypot(before.sd, after.sd),
    threshold,
    mdc95: context.mdc95,
    largerThanError: Math.abs(change) > threshold,
    warnings,
  }
}
