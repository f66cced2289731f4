import jStat from 'jstat'
import { GeometryError } from './geometry-error'
import type { Interval } from './interval'

/** How much a disagreement by several steps of an ordinal scale counts. */
export type KappaWeights = 'none' | 'linear' | 'quadratic'

export interface Kappa {
  readonly value: number
  /** Large-sample standard error. */
  readonly se: number
  readonly interval: Interval
}

function agreementWeight(row: number, column: number, size: number, weights: KappaWeights): number {
  if (weights === 'none') return row === column ? 1 : 0
  const step = Math.abs(row - column) / (size - 1)
  return weights === 'linear' ? 1 - step : 1 - step * step
}

interface Proportions {
  readonly total: number
  readonly cells: readonly (readonly number[])[]
  readonly rows: readonly number[]
  readonly columns: readonly number[]
}

function proportionsOf(counts: readonly (readonly number[])[]): Proportions {
  const size = counts.length
  if (size < 2) throw new GeometryError('not-enough-data', 'Kappa needs two categories')
  if (counts.some(row => row.length !== size)) throw new GeometryError('shape-mismatch', 'The table must be square')
  if (!counts.flat().every(count => Number.isFinite(count) && count >= 0)) throw new GeometryError('not-finite', 'A count is not a number')
  const total = counts.flat().reduce((sum, count) => sum + count, 0)
  if (!(total > 0)) throw new GeometryError('not-enough-data', 'The table is empty')
  const cells = counts.map(row => row.map(count => count / total))
  return {
    total,
    cells,
    rows: cells.map(row => row.reduce((sum, cell) => sum + cell, 0)),
    columns: cells.map((_, column) => cells.reduce((sum, row) => sum + (row[column] ?? 0), 0)),
  }
}

/**
 * Cohen's kappa of two raters on one scale, plain or weighted.
 * @param counts square table: how often the first rater chose the row and the second the column, categories in order
 * @throws GeometryError `not-enough-data`, `shape-mismatch`, `not-finite`; `out-of-range` when all ratings fall in one category.
 * Source: Cohen 1968, Psychol Bull 70:213–220; standard error: Fleiss, Cohen & Everitt 1969, Psychol Bull 72:323–327.
 */
export function kappa(counts: readonly (readonly number[])[], weights: KappaWeights = 'none', confidence = 0.95): Kappa {
  const { total, cells, rows, columns } = proportionsOf(counts)
  const size = cells.length
  const weightOf = (row: number, column: number) => agreementWeight(row, column, size, weights)
  const pairs = rows.flatMap((rowShare, row) => columns.map((columnShare, column) => ({ row, column, weight: weightOf(row, column), rowShare, columnShare })))
  const observed = pairs.reduce((sum, pair) => sum + pair.weight * (cells[pair.row]?.[pair.column] ?? 0), 0)
  const expected = pairs.reduce((sum, pair) => sum + pair.weight * pair.rowShare * pair.columnShare, 0)
  if (!(expected < 1)) throw new GeometryError('out-of-range', 'All ratings fall in one category')
  const value = (observed - expected) / (1 - expected)
  const rowMeans = rows.map((_, row) => columns.reduce((sum, share, column) => sum + share * weightOf(row, column), 0))
  const columnMeans = columns.map((_, column) => rows.reduce((sum, share, row) => sum + share * weightOf(row, column), 0))
  const spread = pairs.reduce((sum, { row, column, weight }) => {
    const term = weight - ((rowMeans[row] ?? 0) + (columnMeans[column] ?? 0)) * (1 - value)
    return sum + (cells[row]?.[column] ?? 0) * term ** 2
  }, 0)
  const variance = (spread - (value - expected * (1 - value)) ** 2) / (total * (1 - expected) ** 2)
  const se = Math.sqrt(Math.max(0, variance))
  const z = jStat.normal.inv((1 + confidence) / 2, 0, 1)
  return { value, se, interval: { low: value - z * se, high: value + z * se } }
}
