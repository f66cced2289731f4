import { definePlumbOffset } from '../plumb-offset'

export const plumbOffsetEar = definePlumbOffset('plumbOffset.ear', 'tragus', 'head', 'Standing: ear 59 ± 16 mm in front of the ankle.')
