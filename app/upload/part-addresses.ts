interface PartAddressOptions {
  /** Parts that will want an address, in the order in which they are sent. */
  readonly wanted: readonly number[]
  readonly sign: (partNumbers: number[]) => Promise<{ partNumber: number, url: string }[]>
  readonly now: () => number
}

/** Few, because a signed address is a key to that part for as long as it holds. */
const AHEAD = 8
/** The server signs for ten minutes; an address is not used in its last two. */
const LIFETIME_MS = 480_000

/** Signed addresses of the parts of one upload: asked for a few at a time, kept until they are used, refused or old. */
export function createPartAddresses({ wanted, sign, now }: PartAddressOptions) {
  const known = new Map<number, { url: string, signedAt: number }>()
  const coming = new Map<number, Promise<void>>()

  function fresh(partNumber: number): string | null {
    const address = known.get(partNumber)
    return address && now() - address.signedAt < LIFETIME_MS ? address.url : null
  }

  function batchFrom(partNumber: number): number[] {
    const later = wanted.slice(wanted.indexOf(partNumber) + 1).filter(other => !known.has(other) && !coming.has(other))
    return [partNumber, ...later].slice(0, AHEAD)
  }

  async function signBatch(partNumbers: number[]): Promise<void> {
    // Asked before, so that an address is never taken for younger than it is.
    const signedAt = now()
    try {
      for (const { partNumber, url } of await sign(partNumbers)) known.set(partNumber, { url, signedAt })
    } finally {
      for (const partNumber of partNumbers) coming.delete(partNumber)
    }
  }

  async function of(partNumber: number): Promise<string | null> {
    const found = fresh(partNumber)
    if (found) return found
    known.delete(partNumber)
    const pending = coming.get(partNumber)
    if (pending) {
      await pending
    } else {
      const batch = batchFrom(partNumber)
      const signing = signBatch(batch)
      for (const one of batch) coming.set(one, signing)
      await signing
    }
    return fresh(partNumber)
  }

  return {
    /** @returns an address that can be used now; null when the server gave none. */
    of,
    /** The storage refused it, or it was used. */
    forget: (partNumber: number) => { known.delete(partNumber) },
  }
}
