import type { bout } from '#server/database/schema/bout'
import type { Bout } from '#shared/schemas/bout'

type Row = typeof bout.$inferSelect

/** @returns weight off the feet / body mass * 100, to a tenth; null when either is unknown. */
export function supportPercentOf(weightOffKg: number | null, massKg: number | null): number | null {
  return weightOffKg === null || !massKg ? null : Math.round(weightOffKg / massKg * 1000) / 10
}

/** @returns (stronger - weaker) / (stronger + weaker) * 100, to a tenth; null when either scale was not read or both show nothing. */
export function loadAsymmetryOf(strongerKg: number | null, weakerKg: number | null): number | null {
  if (strongerKg === null || weakerKg === null || strongerKg + weakerKg === 0) return null
  return Math.round((strongerKg - weakerKg) / (strongerKg + weakerKg) * 1000) / 10
}

/** @param massKg the patient's mass of that day, as the session keeps it. */
export function toBout(row: Row, massKg: number | null): Bout {
  return {
    ...row,
    startedAt: row.startedAt.toISOString(),
    endedAt: row.endedAt?.toISOString() ?? null,
    durationMs: row.endedAt ? row.endedAt.getTime() - row.startedAt.getTime() : null,
    supportPercent: supportPercentOf(row.weightOffKg, massKg),
    loadAsymmetryPercent: loadAsymmetryOf(row.loadStrongerKg, row.loadWeakerKg),
  }
}
