import type { reading } from '#server/database/schema/reading'
import type { ReadingJson } from '#shared/schemas/reading'

type Row = Pick<typeof reading.$inferSelect, 'measure' | 'definitionVersion' | 'view' | 'side' | 'value' | 'unit' | 'sd' | 'low' | 'high' | 'targetStatus' | 'warnings'>

/** @returns a kept reading as the interface gives it; absent fields are left out. */
export function toReading(row: Row): ReadingJson {
  const { measure, definitionVersion, view, side, value, unit, sd, low, high, targetStatus, warnings } = row
  return { measure, definitionVersion, view, ...(side ? { side } : {}), value, unit, sd, low, high, ...(targetStatus ? { targetStatus } : {}), warnings }
}
