export interface RateSample { readonly at: number, readonly bytes: number }

/** Long enough to smooth parts that come and go, short enough to notice a change of network. */
const WINDOW_MS = 12_000
/** Before this much time there is nothing honest to say. */
const LEAST_SPAN_MS = 3_000

/** @returns the samples of the last seconds with a new one. `at` in milliseconds, `bytes` sent so far. */
export function addSample(samples: readonly RateSample[], sample: RateSample): RateSample[] {
  return [...samples.filter(({ at }) => sample.at - at <= WINDOW_MS), sample]
}

/** @returns bytes a second over the window, or null while too little is known. */
export function rateOf(samples: readonly RateSample[]): number | null {
  const [first, last] = [samples[0], samples.at(-1)]
  if (!first || !last || last.at - first.at < LEAST_SPAN_MS) return null
  const rate = (last.bytes - first.bytes) * 1000 / (last.at - first.at)
  return rate > 0 ? rate : null
}

/** Remaining time as far as one can know it: never to the second. */
export type Remaining =
  | { readonly unit: 'moments' }
  | { readonly unit: 'seconds' | 'minutes', readonly count: number }
  | { readonly unit: 'hours', readonly count: number, readonly minutes: number }

/**
 * @param bytes what is left
 * @param rate bytes a second
 */
export function remainingOf(bytes: number, rate: number): Remaining {
  const seconds = bytes / rate
  if (seconds < 10) return { unit: 'moments' }
  if (seconds <= 50) return { unit: 'seconds', count: Math.ceil(seconds / 10) * 10 }
  const minutes = Math.max(1, Math.round(seconds / 60))
  if (minutes < 60) return { unit: 'minutes', count: minutes }
  const tens = Math.round(seconds / 600)
  return { unit: 'hours', count: Math.floor(tens / 6), minutes: tens % 6 * 10 }
}
