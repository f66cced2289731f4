import type { Segment } from '#shared/geometry/landmarks'

/** Design tokens as the canvas needs them: it does not know CSS variables. */
export interface StageHues {
  readonly segment: (segment: Segment) => string
  readonly core: string
  readonly casing: string
  readonly brass: string
  readonly font: string
}

/** Reads the tokens of the page. Segments without a hue of their own (foot, equipment) take the light core. */
export function readStageHues(element: Element): StageHues {
  const style = getComputedStyle(element)
  const token = (name: string) => style.getPropertyValue(`--${name}`).trim()
  return {
    segment: segment => token(`lit-${segment}`) || token('core'),
    core: token('core'),
    casing: token('casing'),
    brass: token('bench-brass'),
    font: token('font') || 'sans-serif',
  }
}
