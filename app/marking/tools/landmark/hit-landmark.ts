import { distance, imagePoint } from '#shared/geometry/point'
import type { MarkingDocument } from '../../document'
import type { PointerInput } from '../tool'

/** @returns the marked landmark nearest to the pointer and within its reach, or `null`. */
export function hitLandmark(document: MarkingDocument, input: PointerInput): string | null {
  let nearest: string | null = null
  let best = input.reach
  for (const [name, point] of Object.entries(document.landmarks)) {
    const away = distance(input.at, imagePoint(point.x, point.y))
    if (away > best) continue
    best = away
    nearest = name
  }
  return nearest
}
