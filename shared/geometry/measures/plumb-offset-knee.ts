import { definePlumbOffset } from '../plumb-offset'

export const plumbOffsetKnee = definePlumbOffset('plumbOffset.knee', 'lateralEpicondyle', 'shank', 'Standing: knee 38 ± 20 mm in front of the ankle.')
