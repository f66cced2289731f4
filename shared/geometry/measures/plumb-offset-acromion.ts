import { definePlumbOffset } from '../plumb-offset'

export const plumbOffsetAcromion = definePlumbOffset('plumbOffset.acromion', 'acromion', 'trunk', 'Standing: shoulder 38 ± 19 mm in front of the ankle.')
