import { definePlumbOffset } from '../plumb-offset'

export const plumbOffsetGreaterTrochanter = definePlumbOffset(
  'plumbOffset.greaterTrochanter',
  'greaterTrochanter',
  'thigh',
  'Standing: hip 62 ± 13 mm in front of the ankle.',
)
