import { Z95 } from './error-band'
import type { Unit } from './reading'

/** Band from which a unit needs one digit less, and the digits after the point on either side of it. */
interface Digits {
  readonly coarseFrom: number
  readonly coarse: number
  readonly fine: number
}

const DIGITS: Readonly<Record<Unit, Digits>> = {
  'deg': { coarseFrom: 2, coarse: 0, fine: 1 },
  'mm': { coarseFrom: 2, coarse: 0, fine: 1 },
  '%': { coarseFrom: 2, coarse: 0, fine: 1 },
  '1': { coarseFrom: 0.2, coarse: 1, fine: 2 },
}

const MARKS: Readonly<Record<Unit, string>> = { 'deg': '°', 'mm': ' mm', '%': ' %', '1': '' }

/** A value cut to the digits that its band supports. */
export interface ShownReading {
  /** Rounded to `decimals`; never −0. */
  readonly value: number
  /** Half width of the 95 % band, rounded; at least one last digit unless the sd is 0. */
  readonly band: number
  readonly decimals: number
  /** As in `7.6° ± 1.6`, with a true minus sign. */
  readonly text: string
}

function roundTo(value: number, decimals: number): number {
  const factor = 10 ** decimals
  return Math.round(value * factor) / factor + 0
}

/** Fixed digits with a true minus sign. */
function fixed(value: number, decimals: number): string {
  return value.toFixed(decimals).replace('-', '−')
}

/**
 * How a reading is shown. The number behind ± is the half width of the 95 % band, 1.96 · sd, the same 95 % as `low` and
 * `high`: a band of 2 or more shows whole degrees, millimetres or percent (`11° ± 3`), a smaller one one decimal
 * (`7.6° ± 1.6`); a ratio shows one decimal from a band of 0.2 on, else two. Whether a band reaches 2 is decided as it
 * would be printed, so that `± 2.0` never appears.
 * @param sd standard deviation in `unit`
 */
export function formatReading(value: number, sd: number, unit: Unit): ShownReading {
  const { coarseFrom, coarse, fine } = DIGITS[unit]
  const halfWidth = Z95 * sd
  const decimals = roundTo(halfWidth, fine) >= coarseFrom ? coarse : fine
  const smallest = sd > 0 ? 10 ** -decimals : 0
  const shown = roundTo(value, decimals)
  const band = Math.max(roundTo(halfWidth, decimals), smallest)
  return { value: shown, band, decimals, text: `${fixed(shown, decimals)}${MARKS[unit]} ± ${fixed(band, decimals)}` }
}
