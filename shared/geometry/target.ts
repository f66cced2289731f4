import { errorFunction } from 'simple-statistics'
import type { TargetStatus, Unit } from './reading'

/** Limits of a target in the unit of the reading; null leaves that end open. */
export interface TargetZone {
  readonly low: number | null
  readonly high: number | null
  /** For a measure that comes in more than one unit: readings in another one are not judged. */
  readonly unit?: Unit
}

/** Probabilities from which a reading counts as within or outside. */
export interface TargetJudgement {
  readonly within: number
  readonly outside: number
}

/** Within from P = 0.8, outside up to P = 0.2, else unclear (a design choice of ours; a clinic may set its own). */
export const DEFAULT_JUDGEMENT: TargetJudgement = { within: 0.8, outside: 0.2 }

/** Φ(z), the standard normal distribution. Source: the error function of simple-statistics, error below 1.2e-7. */
function normalCdf(z: number): number {
  if (z > 8) return 1
  if (z < -8) return 0
  return (1 + errorFunction(z / Math.SQRT2)) / 2
}

/**
 * Probability that the true value lies inside the zone when the reading is normal with this sd.
 * With sd 0 it is 1 inside (limits included) and 0 outside.
 */
export function probabilityWithin(zone: TargetZone, value: number, sd: number): number {
  const low = zone.low ?? -Infinity
  const high = zone.high ?? Infinity
  if (sd === 0) return value >= low && value <= high ? 1 : 0
  return Math.max(0, normalCdf((high - value) / sd) - normalCdf((low - value) / sd))
}

/** *within* when P(inside) reaches `judgement.within`, *outside* when it is at most `judgement.outside`, else *unclear*. */
export function targetStatus(zone: TargetZone, value: number, sd: number, judgement: TargetJudgement = DEFAULT_JUDGEMENT): TargetStatus {
  const probability = probabilityWithin(zone, value, sd)
  if (probability >= judgement.within) return 'within'
  if (probability <= judgement.outside) return 'outside'
  return 'unclear'
}
