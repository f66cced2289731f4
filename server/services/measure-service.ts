import { GeometryError } from '#shared/geometry/geometry-error'
import { measureMarking } from '#shared/geometry/measure-marking'
import type { MeasureInput } from '#shared/schemas/marking'
import type { ReadingJson } from '#shared/schemas/reading'
import { AppError, type AppErrorCode } from './app-error'

/** Faults of a marking that have a code of their own; all others are `validation-failed` with the field named. */
const NAMED = ['facing-required', 'plumb-line-too-short', 'landmarks-coincide'] as const satisfies readonly AppErrorCode[]

type Targets = Record<string, { low: number, high: number }>

/**
 * Computes the readings of a marking, as the browser does, with the clinic's own targets.
 * @throws AppError 400 that names the landmark or field at fault
 */
export function measure(input: Omit<MeasureInput, 'status'>, targets: Targets): ReadingJson[] {
  try {
    return measureMarking(input, { targets }).readings.map(reading => ({ ...reading, warnings: [...reading.warnings] }))
  } catch (error) {
    if (!(error instanceof GeometryError)) throw error
    const code = NAMED.find(named => named === error.code) ?? 'validation-failed'
    throw new AppError(code, { issues: [{ path: error.path.join('.'), message: error.code }], cause: error })
  }
}
