import { type Degrees, degrees, toRadians } from './angle'
import { Z95 } from './error-band'
import type { LandmarkId, Segment } from './landmarks'
import type { MarkingBody } from './marking'
import type { MeasureLine } from './measure-definition'
import { MEASURE_PLANS } from './measure-plan'
import { type ImagePoint, imagePoint } from './point'
import type { Reading } from './reading'

/** The band of a line's angle, drawn: a triangle from `apex` that opens by `halfAngle` to either side. */
export interface ErrorWedge {
  readonly apex: ImagePoint
  /** Ends of the two edges, as far from the apex as the line is long. */
  readonly edges: readonly [ImagePoint, ImagePoint]
  readonly halfAngle: Degrees
}

/** A segment line on the picture. */
export interface SegmentLine {
  /** The measure whose own angle it shows; null where the line only serves others. */
  readonly measure: string | null
  readonly segment: Segment
  readonly from: ImagePoint
  readonly to: ImagePoint
  readonly wedge: ErrorWedge | null
}

/** A wedge wider than this would no longer read as one. */
const WIDEST_HALF_ANGLE = 60

function turnAbout(apex: ImagePoint, point: ImagePoint, byRadians: number): ImagePoint {
  const cos = Math.cos(byRadians)
  const sin = Math.sin(byRadians)
  const x = point.x - apex.x
  const y = point.y - apex.y
  return imagePoint(apex.x + x * cos - y * sin, apex.y + x * sin + y * cos)
}

/**
 * The wedge of ±1.96 sd about the line from `from`, its apex, to `to`. Capped at ±60°.
 * @param sd of the line's angle in degrees
 */
export function errorWedge(from: ImagePoint, to: ImagePoint, sd: Degrees): ErrorWedge {
  const halfAngle = degrees(Math.min(Z95 * sd, WIDEST_HALF_ANGLE))
  const half = toRadians(halfAngle)
  return { apex: from, edges: [turnAbout(from, to, -half), turnAbout(from, to, half)], halfAngle }
}

function meanPoint(ids: readonly LandmarkId[], body: MarkingBody): ImagePoint | null {
  let x = 0
  let y = 0
  for (const id of ids) {
    const mark = body.landmarks[id]
    if (!mark) return null
    x += mark.x / ids.length
    y += mark.y / ids.length
  }
  return imagePoint(x, y)
}

function keyOf(line: MeasureLine): string {
  return [line.from.join('+'), line.to.join('+')].sort().join('>')
}

function angleReading(readings: readonly Reading[], measure: string): Reading | null {
  return readings.find(reading => reading.measure === measure && reading.unit === 'deg') ?? null
}

function drawLine(line: MeasureLine, body: MarkingBody, reading: Reading | null): SegmentLine | null {
  const from = meanPoint(line.from, body)
  const to = meanPoint(line.to, body)
  if (!from || !to) return null
  return {
    measure: reading?.measure ?? null,
    segment: line.segment,
    from,
    to,
    wedge: reading ? errorWedge(from, to, degrees(reading.sd)) : null,
  }
}

/**
 * The segment lines that the marked landmarks allow, each once, with the wedge of the reading whose angle it is. A line that
 * belongs to a joint only (the two thighs of the frontal view) carries no wedge.
 * @param readings what `measureMarking` gave for this body
 */
export function segmentLines(body: MarkingBody, readings: readonly Reading[]): readonly SegmentLine[] {
  const lines = new Map<string, SegmentLine>()
  const recipes = MEASURE_PLANS[body.view].flatMap(plan => plan.recipes.map(recipe => ({ id: plan.definition.id, recipe })))
  for (const { id, recipe } of recipes.filter(item => item.recipe.unit === 'deg')) {
    const reading = recipe.lines.length === 1 ? angleReading(readings, id) : null
    for (const line of recipe.lines) {
      const drawn = drawLine(line, body, reading)
      if (drawn && (drawn.wedge || !lines.has(keyOf(line)))) lines.set(keyOf(line), drawn)
    }
  }
  return [...lines.values()]
}
