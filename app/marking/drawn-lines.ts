import type { LandmarkId, Segment, View } from '#shared/geometry/landmarks'
import { imagePoint } from '#shared/geometry/point'
import type { ImagePoint } from '#shared/geometry/point'
import type { MeasureLine } from '#shared/geometry/measure-definition'
import { measuresOf } from '#shared/geometry/registry'
import type { MarkingDocument } from './document'

/** A line that is drawn on the picture between two landmarks or means of landmarks. */
export interface DrawnLine {
  readonly id: string
  readonly segment: Segment
  readonly from: ImagePoint
  readonly to: ImagePoint
  /** Half the 95 % band of the line's own direction in degrees, or `null` when no reading tells. */
  readonly halfBandDeg: number | null
}

/** As much of a reading as the picture needs. */
export interface BandReading { readonly measure: string, readonly side?: string | undefined, readonly low: number, readonly high: number }

function meanOf(document: MarkingDocument, ids: readonly LandmarkId[]): ImagePoint | null {
  const points = ids.map(id => document.landmarks[id])
  let x = 0
  let y = 0
  for (const point of points) {
    if (!point) return null
    x += point.x / points.length
    y += point.y / points.length
  }
  return imagePoint(x, y)
}

function keyOf(line: MeasureLine): string {
  return [line.from, line.to].map(ids => ids.join('+')).sort().join('|')
}

/** Lines of a view with the measure whose reading is the line's own direction, where there is one. */
function linesOf(view: View): ReadonlyMap<string, { readonly line: MeasureLine, readonly measure: string | null }> {
  const lines = new Map<string, { line: MeasureLine, measure: string | null }>()
  for (const measure of measuresOf(view)) {
    for (const recipe of measure.recipes) {
      if (!recipe.views.includes(view) || !isShown(measure.id, recipe.unit)) continue
      const owner = recipe.unit === 'deg' && recipe.lines.length === 1 ? measure.id : null
      for (const line of recipe.lines) {
        const known = lines.get(keyOf(line))
        if (!known) lines.set(keyOf(line), { line, measure: owner })
        else if (owner && !known.measure) lines.set(keyOf(line), { line, measure: owner })
      }
    }
  }
  return lines
}

/** Angles show their lines; of the offsets only the upper arm does, the others would cover the body with lines. */
function isShown(measure: string, unit: string): boolean {
  return unit === 'deg' || measure === 'elbowUnderShoulder'
}

/**
 * The lines whose ends are all marked, each once, with the band of its direction.
 * @param readings of this very document; a line without one has no band.
 */
export function drawnLines(document: MarkingDocument, view: View, readings: readonly BandReading[]): readonly DrawnLine[] {
  const drawn: DrawnLine[] = []
  for (const [id, { line, measure }] of linesOf(view)) {
    const from = meanOf(document, line.from)
    const to = meanOf(document, line.to)
    if (!from || !to) continue
    const reading = measure === null ? undefined : readings.find(candidate => candidate.measure === measure)
    drawn.push({ id, segment: line.segment, from, to, halfBandDeg: reading ? (reading.high - reading.low) / 2 : null })
  }
  return drawn
}

/**
 * The band as a triangle: its tip at the line's beginning, as long as the line, opened by the band on both sides.
 * @returns tip, one corner, other corner in picture pixels; `null` without a band. Bands of 80° and more are drawn as 80°.
 */
export function bandTriangle(line: DrawnLine): readonly [ImagePoint, ImagePoint, ImagePoint] | null {
  if (line.halfBandDeg === null || !(line.halfBandDeg > 0)) return null
  const half = Math.min(line.halfBandDeg, 80) * Math.PI / 180
  const dx = line.to.x - line.from.x
  const dy = line.to.y - line.from.y
  const turned = (angle: number) => imagePoint(
    line.from.x + dx * Math.cos(angle) - dy * Math.sin(angle),
    line.from.y + dx * Math.sin(angle) + dy * Math.cos(angle),
  )
  return [line.from, turned(half), turned(-half)]
}
