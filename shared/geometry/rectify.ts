import { determinant, Matrix, SingularValueDecomposition, solve } from 'ml-matrix'
import { GeometryError } from './geometry-error'
import { type ImagePoint, imagePoint } from './point'

/** A place in the real plane, in the unit of the known points. */
export interface PlanePoint {
  readonly x: number
  readonly y: number
}

/** A point seen on the picture whose place in the plane is known. */
export interface KnownPoint {
  readonly image: ImagePoint
  readonly plane: PlanePoint
}

/** A plane-to-plane projection, row by row, scaled so that its last entry is 1. */
export type Homography = readonly [number, number, number, number, number, number, number, number, number]

const FEWEST_POINTS = 4
/** Second smallest over largest singular value, and determinant of the unit projection, below which the points fix no plane. */
const RANK_TOLERANCE = 1e-7
/** Gauss–Newton steps; each squares the remaining error, so a few are plenty. */
const REFINING_STEPS = 5

interface Normalised {
  readonly points: readonly PlanePoint[]
  readonly centre: PlanePoint
  readonly factor: number
}

/** Centroid to the origin, mean distance √2. Source: Hartley 1997, In defense of the eight-point algorithm. */
function normalise(points: readonly PlanePoint[]): Normalised {
  const x = points.reduce((sum, point) => sum + point.x, 0) / points.length
  const y = points.reduce((sum, point) => sum + point.y, 0) / points.length
  const meanDistance = points.reduce((sum, point) => sum + Math.hypot(point.x - x, point.y - y), 0) / points.length
  if (!(meanDistance > 0)) throw new GeometryError('points-on-a-line', 'The known points are all one point')
  const factor = Math.SQRT2 / meanDistance
  return { points: points.map(point => ({ x: (point.x - x) * factor, y: (point.y - y) * factor })), centre: { x, y }, factor }
}

function designRows(from: PlanePoint, to: PlanePoint): number[][] {
  return [
    [-from.x, -from.y, -1, 0, 0, 0, to.x * from.x, to.x * from.y, to.x],
    [0, 0, 0, -from.x, -from.y, -1, to.y * from.x, to.y * from.y, to.y],
  ]
}

/** The direction that all rows are square to: the right singular vector of the smallest singular value. */
function nullVector(rows: readonly number[][]): number[] {
  // With four points there are eight rows: a ninth of zeros makes the decomposition give all nine vectors.
  const padded = rows.length < 9 ? [...rows, new Array<number>(9).fill(0)] : [...rows]
  const svd = new SingularValueDecomposition(new Matrix(padded), { autoTranspose: false })
  const order = svd.diagonal.map((value, index) => ({ value, index })).sort((a, b) => b.value - a.value)
  const largest = order[0]?.value ?? 0
  if (!((order[7]?.value ?? 0) > RANK_TOLERANCE * largest)) {
    throw new GeometryError('points-on-a-line', 'Three of the known points lie on one line')
  }
  const h = svd.rightSingularVectors.getColumn(order[8]?.index ?? 8)
  // With three of four points on a line the rows are independent, but what fits them folds the plane onto a line.
  if (!(Math.abs(determinant(asMatrix(h))) > RANK_TOLERANCE)) {
    throw new GeometryError('points-on-a-line', 'Three of the known points lie on one line')
  }
  return h
}

function asMatrix(h: readonly number[]): Matrix {
  return new Matrix([[...h.slice(0, 3)], [...h.slice(3, 6)], [...h.slice(6, 9)]])
}

/** One Gauss–Newton step on the distances in the plane; `h` has its last entry at 1. */
function refineOnce(h: readonly number[], from: readonly PlanePoint[], to: readonly PlanePoint[]): number[] {
  const [a = 0, b = 0, c = 0, d = 0, e = 0, f = 0, g = 0, k = 0] = h
  const slopes: number[][] = []
  const misses: number[][] = []
  from.forEach(({ x, y }, index) => {
    const depth = g * x + k * y + 1
    const u = (a * x + b * y + c) / depth
    const v = (d * x + e * y + f) / depth
    const aim = to[index] ?? { x: u, y: v }
    slopes.push([x, y, 1, 0, 0, 0, -x * u, -y * u].map(part => part / depth))
    slopes.push([0, 0, 0, x, y, 1, -x * v, -y * v].map(part => part / depth))
    misses.push([aim.x - u], [aim.y - v])
  })
  const step = solve(new Matrix(slopes), new Matrix(misses)).to1DArray()
  return h.map((entry, index) => entry + (step[index] ?? 0))
}

/** From the algebraic to the geometric least squares: the sum of squared distances in the plane becomes smallest. */
function refined(h: readonly number[], from: Normalised, to: Normalised): readonly number[] {
  const last = h[8] ?? 0
  if (from.points.length === FEWEST_POINTS || last === 0) return h
  let best: readonly number[] = h.map(entry => entry / last)
  for (let step = 0; step < REFINING_STEPS; step++) best = refineOnce(best, from.points, to.points)
  return best.every(Number.isFinite) ? best : h
}

function denormalise(h: readonly number[], from: Normalised, to: Normalised): Homography {
  const turnFrom = new Matrix([
    [from.factor, 0, -from.factor * from.centre.x],
    [0, from.factor, -from.factor * from.centre.y],
    [0, 0, 1],
  ])
  const turnBack = new Matrix([[1 / to.factor, 0, to.centre.x], [0, 1 / to.factor, to.centre.y], [0, 0, 1]])
  const whole = turnBack.mmul(asMatrix(h)).mmul(turnFrom).to1DArray()
  const last = whole[8] ?? 0
  if (last === 0 || !whole.every(Number.isFinite)) {
    throw new GeometryError('out-of-range', 'The picture origin has no place in the plane')
  }
  const [a = 0, b = 0, c = 0, d = 0, e = 0, f = 0, g = 0, k = 0] = whole.map(value => value / last)
  return [a, b, c, d, e, f, g, k, 1]
}

/**
 * The projection that takes picture points into a flat plane (a wall, a floor mat, the person's own plane), from four or more known
 * points; with more than four it leaves the smallest sum of squared distances in the plane.
 * @throws GeometryError `not-enough-points` under four, `not-finite` for numbers that are none, `points-on-a-line` when they do not
 * fix the plane.
 * Source: direct linear transformation with normalisation, Hartley & Zisserman, Multiple View Geometry, algorithm 4.2, then
 * Gauss–Newton.
 */
export function fitHomography(known: readonly KnownPoint[]): Homography {
  if (known.length < FEWEST_POINTS) throw new GeometryError('not-enough-points', 'Rectification needs four known points')
  const numbers = known.flatMap(({ image, plane }) => [image.x, image.y, plane.x, plane.y])
  if (!numbers.every(Number.isFinite)) throw new GeometryError('not-finite', 'A known point is not a number')
  const from = normalise(known.map(point => point.image))
  const to = normalise(known.map(point => point.plane))
  const rows = from.points.flatMap((point, index) => designRows(point, to.points[index] ?? point))
  return denormalise(refined(nullVector(rows), from, to), from, to)
}

function project(h: Homography, x: number, y: number): PlanePoint {
  const depth = h[6] * x + h[7] * y + h[8]
  const at = { x: (h[0] * x + h[1] * y + h[2]) / depth, y: (h[3] * x + h[4] * y + h[5]) / depth }
  if (!Number.isFinite(at.x) || !Number.isFinite(at.y)) {
    throw new GeometryError('out-of-range', 'The point lies on the horizon of the plane')
  }
  return at
}

/**
 * Where a picture point lies in the plane, in the unit of the known points.
 * @throws GeometryError `out-of-range` on the horizon of the plane.
 */
export function rectifyPoint(homography: Homography, point: ImagePoint): PlanePoint {
  return project(homography, point.x, point.y)
}

/** The way back: where a place in the plane is seen on the picture. */
export function unrectifyPoint(homography: Homography, point: PlanePoint): ImagePoint {
  const [a, b, c, d, e, f, g, k, l] = homography
  const inverse: Homography = [
    e * l - f * k, c * k - b * l, b * f - c * e,
    f * g - d * l, a * l - c * g, c * d - a * f,
    d * k - e * g, b * g - a * k, a * e - b * d,
  ]
  const { x, y } = project(inverse, point.x, point.y)
  return imagePoint(x, y)
}

/** Root mean square distance between where the known points are and where the projection puts them, in their unit. */
export function rectificationError(homography: Homography, known: readonly KnownPoint[]): number {
  if (known.length === 0) throw new GeometryError('not-enough-points', 'There is nothing to compare')
  const squares = known.map(({ image, plane }) => {
    const at = rectifyPoint(homography, image)
    return (at.x - plane.x) ** 2 + (at.y - plane.y) ** 2
  })
  return Math.sqrt(squares.reduce((sum, square) => sum + square, 0) / known.length)
}
