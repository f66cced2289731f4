/** Between what fields hold (text) and what a schema wants (numbers, null for nothing). */

/** @returns null for an empty field, NaN for what is no number. A comma counts as the decimal point. */
export function toNumber(text: string): number | null {
  const trimmed = text.trim().replace(',', '.')
  if (trimmed === '') return null
  return /^[-+]?(\d+\.?\d*|\.\d+)$/.test(trimmed) ? Number(trimmed) : Number.NaN
}

/** @returns null for an empty field, else the trimmed text. */
export function toText(text: string): string | null {
  return text.trim() === '' ? null : text.trim()
}

/** @returns what a field shows for a number that may be missing. */
export function fromNumber(value: number | null | undefined): string {
  return value === null || value === undefined ? '' : String(value)
}
