import type { StoredPart, UploadPlan } from './upload-network'

/** First byte of a part and the byte after its last. Parts count from 1. */
export function partRange(plan: UploadPlan, size: number, partNumber: number): { start: number, end: number } {
  const start = (partNumber - 1) * plan.partSize
  return { start, end: Math.min(size, start + plan.partSize) }
}

/** Bytes of a part; 0 for a number outside of the plan. */
export function partLength(plan: UploadPlan, size: number, partNumber: number): number {
  if (partNumber < 1 || partNumber > plan.partCount) return 0
  const { start, end } = partRange(plan, size, partNumber)
  return Math.max(0, end - start)
}

/** The parts that the storage holds whole; one of another length was cut off and counts as missing. */
export function wholeParts(plan: UploadPlan, size: number, stored: readonly StoredPart[]): StoredPart[] {
  return stored.filter(part => part.size > 0 && part.size === partLength(plan, size, part.partNumber))
}

/** @returns numbers of the parts that are still to be sent, in order. */
export function missingParts(plan: UploadPlan, size: number, stored: readonly StoredPart[]): number[] {
  const held = new Set(wholeParts(plan, size, stored).map(part => part.partNumber))
  return Array.from({ length: plan.partCount }, (_, index) => index + 1).filter(partNumber => !held.has(partNumber))
}
