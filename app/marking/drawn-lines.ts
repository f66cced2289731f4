import type { LandmarkId, Segment } from '#shared/geometry/landmarks'
import type { MarkingBody } from '#shared/geometry/marking'
import { imagePoint } from '#shared/geometry/point'
import type { ImagePoint } from '#shared/geometry/point'
import type { Reading } from '#shared/geometry/reading'
import { segmentLines } from '#shared/geometry/wedge'
import type { ErrorWedge } from '#shared/geometry/wedge'

/** A line that is drawn on the picture; `id` stays the same while its ends move. */
export interface DrawnLine {
  readonly id: string
  readonly measure: string | null
  readonly segment: Segment
  readonly from: ImagePoint
  readonly to: ImagePoint
  readonly wedge: ErrorWedge | null
}

/** Arms bear no angle of their own; their lines only help the eye. */
const ARM_LINES: readonly (readonly [LandmarkId, LandmarkId])[] = [
  ['acromion', 'elbow'], ['elbow', 'wrist'], ['acromionLeft', 'elbowLeft'], ['acromionRight', 'elbowRight'],
]

function armLines(body: MarkingBody): readonly DrawnLine[] {
  return ARM_LINES.flatMap(([first, second]) => {
    const from = body.landmarks[first]
    const to = body.landmarks[second]
    if (!from || !to) return []
    return [{ id: `${first}-${second}`, measure: null, segment: 'arm' as const, from: imagePoint(from.x, from.y), to: imagePoint(to.x, to.y), wedge: null }]
  })
}

/**
 * The lines whose ends are all marked, with the wedge of the 95 % band where a reading tells it, in the order in which they are drawn.
 * @param readings of this very body; without them the lines have no wedges.
 */
export function drawnLines(body: MarkingBody, readings: readonly Reading[]): readonly DrawnLine[] {
  const segments = segmentLines(body, readings).map((line, index) => ({ ...line, id: line.measure ?? `segment-${index}` }))
  return [...armLines(body), ...segments]
}
