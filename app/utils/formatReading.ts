const SUFFIX: Record<string, string> = { 'deg': '°', 'mm': ' mm', '%': ' %', '1': '' }

/**
 * The words of a reading. A 95 % band of 2 or more shows whole units, a smaller one a decimal; a ratio shows two.
 * A minus is a true minus sign, and nothing is shown as minus zero.
 */
export function formatReading({ value, sd, unit }: { value: number, sd: number, unit: string }): { value: string, band: string } {
  const band = 1.96 * sd
  const digits = digitsFor(band, unit)
  const rounded = Number(value.toFixed(digits))
  const sign = rounded < 0 ? '−' : ''
  return { value: `${sign}${Math.abs(rounded).toFixed(digits)}${SUFFIX[unit] ?? ` ${unit}`}`, band: sd > 0 ? band.toFixed(digits) : '' }
}

function digitsFor(band: number, unit: string): number {
  if (unit === '1') return 2
  return band >= 2 ? 0 : 1
}
