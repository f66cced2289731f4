import fc from 'fast-check'
import { EMPTY_DOCUMENT } from '~/marking/document'
import type { MarkingDocument } from '~/marking/document'

export const NAMES = ['acromion', 'greaterTrochanter', 'heel', 'tragus'] as const
export const coordinate = fc.double({ min: 0, max: 2000, noNaN: true })
export const point = fc.record({ x: coordinate, y: coordinate })
export const landmark = fc.oneof(point, fc.record({ x: coordinate, y: coordinate, sd: fc.double({ min: 0.1, max: 20, noNaN: true }) }))
export const side = fc.constantFrom('left', 'right', null)
export const plumbLine = fc.record({ top: point, bottom: point })
export const scale = fc.record({ from: point, to: point, lengthMm: fc.integer({ min: 1, max: 20_000 }) })

/** Any marking that the commands can lead to: a landmark is marked, not visible, or neither. */
export const documents: fc.Arbitrary<MarkingDocument> = fc.record({
  states: fc.record(Object.fromEntries(NAMES.map(name => [name, fc.oneof(landmark, fc.constantFrom('clothing', 'support'), fc.constant(null))]))),
  facing: side,
  side,
  mirrored: fc.boolean(),
  clothed: fc.boolean(),
  supported: fc.boolean(),
  plumbLine: fc.option(plumbLine),
  scale: fc.option(scale),
}).map(({ states, ...rest }) => {
  const document = { ...EMPTY_DOCUMENT, ...rest, landmarks: {}, notVisible: {} }
  const landmarks: Record<string, { x: number, y: number }> = {}
  const notVisible: Record<string, string> = {}
  for (const [name, state] of Object.entries(states)) {
    if (typeof state === 'string') notVisible[name] = state
    else if (state) landmarks[name] = state
  }
  return { ...document, landmarks, notVisible }
})
