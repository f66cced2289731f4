import type { Unit } from '#shared/geometry/reading'
import { formatReading } from '#shared/geometry/reading-format'

const UNITS: readonly Unit[] = ['deg', 'mm', '%', '1']

/** The words of a reading that came as JSON, its value and band apart: `5.4°` and `1.6`. The digits follow the band. */
export function readingText({ value, sd, unit }: { value: number, sd: number, unit: string }): { value: string, band: string, text: string } {
  const { text } = formatReading(value, sd, UNITS.find(known => known === unit) ?? '1')
  const [shown = text, band = ''] = text.split(' ± ')
  return { value: shown, band, text }
}
