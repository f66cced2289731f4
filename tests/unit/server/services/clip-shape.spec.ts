import { describe, expect, it } from 'vitest'
import { PART_BYTES, planUpload, sizeOfPart } from '#server/services/clip-shape'

describe('planUpload', () => {
  it.each([[1, 1], [PART_BYTES, 1], [PART_BYTES + 1, 2], [300 * 1024 * 1024, 38], [2 * 1024 ** 3, 256]])('cuts %d bytes into %d parts that together have as many', (size, partCount) => {
    const plan = { size, ...planUpload(size) }
    expect(plan.partCount).toBe(partCount)
    const sizes = Array.from({ length: partCount }, (_, at) => sizeOfPart(plan, at + 1))
    expect(sizes.reduce((sum, bytes) => sum + bytes, 0)).toBe(size)
    // S3: no part before the last is smaller than 5 MiB.
    for (const bytes of sizes.slice(0, -1)) expect(bytes).toBeGreaterThanOrEqual(5 * 1024 * 1024)
    expect(sizes.at(-1)).toBeGreaterThan(0)
  })
})
