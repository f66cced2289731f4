/** A foot is drawn in the hue of its shank; what is no body part has none. */
const HUES: Record<string, string> = { trunk: 'trunk', thigh: 'thigh', shank: 'shank', foot: 'shank', head: 'head', arm: 'arm' }

/** @returns the colour token of a body segment, as a CSS value. `isLit`: for dark pictures and the bench. */
export function segmentHue(segment: string | null | undefined, isLit = false): string {
  const name = segment ? HUES[segment] : undefined
  return name ? `var(--${isLit ? 'lit' : 'seg'}-${name})` : 'var(--ink-soft)'
}
