import type { MarkedLandmark, MarkedPoint, MarkingBody, PlumbLine } from '#shared/geometry/marking'
import type { MeasuredMarking, MeasureOptions } from '#shared/geometry/measure-marking'
import { measureMarking } from '#shared/geometry/measure-marking'
import type { Side } from '#shared/geometry/landmarks'
import type { Reading } from '#shared/geometry/reading'

type Pairs = Readonly<Record<string, readonly [number, number]>>

/** Landmarks from plain pairs. */
export function marks(pairs: Pairs): Record<string, MarkedLandmark> {
  return Object.fromEntries(Object.entries(pairs).map(([name, [x, y]]) => [name, { x, y }]))
}

export function sagittal(pairs: Pairs, parts: Partial<MarkingBody> = {}): MarkingBody {
  return { view: 'sagittal', width: 1080, height: 1080, facing: 'right', landmarks: marks(pairs), ...parts }
}

export function frontal(pairs: Pairs, parts: Partial<MarkingBody> = {}): MarkingBody {
  return { view: 'frontal-anterior', width: 1080, height: 1080, landmarks: marks(pairs), ...parts }
}

/** Everything a frontal-anterior marking can hold, a person who stands a little off. */
export const FRONTAL_PAIRS: Pairs = {
  acromionLeft: [640, 300], acromionRight: [420, 310], asisLeft: [600, 540], asisRight: [470, 536], sternalNotch: [531, 330],
  kneeCentreLeft: [610, 760], kneeCentreRight: [468, 765], ankleCentreLeft: [620, 985], ankleCentreRight: [455, 980],
  tragusLeft: [575, 190], tragusRight: [490, 195], elbowLeft: [670, 470], elbowRight: [390, 480],
}

/** Everything a sagittal marking can hold. */
export const SAGITTAL_PAIRS: Pairs = {
  tragus: [530, 150], c7: [480, 205], acromion: [500, 260], greaterTrochanter: [510, 520], lateralEpicondyle: [516, 760],
  lateralMalleolus: [500, 980], heel: [470, 1010], fifthMetatarsal: [600, 1010], canthus: [575, 140], elbow: [515, 410],
  wrist: [600, 430], axilla: [502, 310], lowerRib: [508, 430], supportTop: [515, 345], armSupportTop: [570, 425],
  thighTop: [540, 560], bodySupportBottom: [535, 530],
}

/** A plumb line that leans by the angle, top to picture right for +, through a point away from the person. */
export function plumbLine(degrees: number, middle: MarkedPoint = { x: 850, y: 500 }, half = 350): PlumbLine {
  const angle = degrees * Math.PI / 180
  return {
    top: { x: middle.x + half * Math.sin(angle), y: middle.y - half * Math.cos(angle) },
    bottom: { x: middle.x - half * Math.sin(angle), y: middle.y + half * Math.cos(angle) },
  }
}

export function reading(result: MeasuredMarking, measure: string, side?: Side): Reading {
  const found = result.readings.find(item => item.measure === measure && (side === undefined || item.side === side))
  if (!found) throw new Error(`No reading of ${measure}`)
  return found
}

/** The value of one measure of a body. */
export function valueOf(body: MarkingBody, measure: string, options: MeasureOptions = {}): number {
  return reading(measureMarking(body, options), measure).value
}

function moved(point: MarkedPoint, move: (point: MarkedPoint) => MarkedPoint): MarkedLandmark {
  return { ...point, ...move(point) }
}

/** The body with every point of it moved: landmarks, plumb line and scale. */
export function mapPoints(body: MarkingBody, move: (point: MarkedPoint) => MarkedPoint): MarkingBody {
  const { plumbLine: line, scale } = body
  return {
    ...body,
    landmarks: Object.fromEntries(Object.entries(body.landmarks).map(([name, mark]) => [name, moved(mark, move)])),
    plumbLine: line ? { top: move(line.top), bottom: move(line.bottom) } : line,
    scale: scale ? { ...scale, from: move(scale.from), to: move(scale.to) } : scale,
  }
}

/** Clockwise on the screen about the picture centre. */
export function turnedClockwise(body: MarkingBody, degrees: number): MarkingBody {
  const angle = degrees * Math.PI / 180
  return mapPoints(body, ({ x, y }) => {
    const dx = x - body.width / 2
    const dy = y - body.height / 2
    return {
      x: body.width / 2 + dx * Math.cos(angle) - dy * Math.sin(angle),
      y: body.height / 2 + dx * Math.sin(angle) + dy * Math.cos(angle),
    }
  })
}

/** As a mirror shows it, with the facing that then is seen. */
export function mirroredSagittal(body: MarkingBody): MarkingBody {
  const flipped = mapPoints(body, ({ x, y }) => ({ x: body.width - x, y }))
  return { ...flipped, facing: body.facing === 'right' ? 'left' : 'right' }
}

const OTHER_SIDE: Readonly<Record<string, string>> = { Left: 'Right', Right: 'Left' }

/** Left names for right ones and the other way round. */
export function sidesExchanged(body: MarkingBody): MarkingBody {
  const rename = (name: string) => name.replace(/(Left|Right)$/, side => OTHER_SIDE[side] ?? side)
  return { ...body, landmarks: Object.fromEntries(Object.entries(body.landmarks).map(([name, mark]) => [rename(name), mark])) }
}
