import { describe, expect, it } from 'vitest'
import { formatReading } from '#shared/geometry/reading-format'

describe('formatReading', () => {
  it.each([
    [7.62, 0.8, 'deg', '7.6° ± 1.6'],
    [11.2, 1.5, 'deg', '11° ± 3'],
    [5.44, 1.02, 'deg', '5° ± 2'],
    [5.44, 0.99, 'deg', '5.4° ± 1.9'],
    [5.44, 1, 'deg', '5° ± 2'],
    [-2.2026, 0.5, 'deg', '−2.2° ± 1.0'],
    [-0.04, 0.5, 'deg', '0.0° ± 1.0'],
    [3, 0.001, 'deg', '3.0° ± 0.1'],
    [3, 0, 'deg', '3.0° ± 0.0'],
    [47.73, 12, 'deg', '48° ± 24'],
    [38.4, 4, 'mm', '38 mm ± 8'],
    [38.4, 0.5, 'mm', '38.4 mm ± 1.0'],
    [8.25, 2, '%', '8 % ± 4'],
    [0.204, 0.04, '1', '0.20 ± 0.08'],
    [0.72, 0.2, '1', '0.7 ± 0.4'],
  ] as const)('shows %f with sd %f %s as %s', (value, sd, unit, text) => {
    expect(formatReading(value, sd, unit).text).toBe(text)
  })

  it('gives the rounded numbers and their digits for other spellings', () => {
    expect(formatReading(7.62, 0.8, 'deg')).toMatchObject({ value: 7.6, band: 1.6, decimals: 1 })
  })
})
