import { imagePoint } from '#shared/geometry/point'
import type { ImagePoint } from '#shared/geometry/point'

declare const stagePointBrand: unique symbol

/** A place on the stage in CSS pixels, origin at its top left corner. */
export type StagePoint = { readonly x: number, readonly y: number } & { readonly [stagePointBrand]: 'stage' }

/** Marks a pair of CSS pixels as a stage point. */
export function stagePoint(x: number, y: number): StagePoint {
  return { x, y } as StagePoint
}

export interface Size { readonly width: number, readonly height: number }

/** How the picture lies on the stage. This file alone converts between the two. */
export interface Viewport {
  /** The stage in CSS pixels. */
  readonly stage: Size
  /** The picture in pixels of the review copy. */
  readonly picture: Size
  /** CSS pixels that one picture pixel takes. */
  readonly scale: number
  /** Where the picture's top left corner lies on the stage, CSS pixels. */
  readonly offset: StagePoint
}

/** The closest look: one picture pixel becomes a square of this many CSS pixels. */
export const MAX_SCALE = 24
/** How far, in CSS pixels, the picture's edge may come in from the stage's edge while zoomed in: room to mark at the border. */
const EDGE_ROOM = 72

function fitScale(stage: Size, picture: Size): number {
  return Math.min(stage.width / picture.width, stage.height / picture.height)
}

function centredOffset(stage: Size, picture: Size, scale: number): StagePoint {
  return stagePoint((stage.width - picture.width * scale) / 2, (stage.height - picture.height * scale) / 2)
}

/**
 * The whole picture, as large as it goes, in the middle of the stage.
 * @throws RangeError when a size is not positive.
 */
export function fitViewport(stage: Size, picture: Size): Viewport {
  if (![stage.width, stage.height, picture.width, picture.height].every(length => length > 0)) {
    throw new RangeError('stage and picture need a positive size')
  }
  const scale = fitScale(stage, picture)
  return { stage, picture, scale, offset: centredOffset(stage, picture, scale) }
}

/** @returns whether the whole picture is in sight, so that zooming out has no further to go. */
export function isFitted(viewport: Viewport): boolean {
  return viewport.scale <= fitScale(viewport.stage, viewport.picture) * 1.000001
}

/** Where a place of the picture lies on the stage. */
export function toStage(viewport: Viewport, point: { readonly x: number, readonly y: number }): StagePoint {
  return stagePoint(viewport.offset.x + point.x * viewport.scale, viewport.offset.y + point.y * viewport.scale)
}

/** Which place of the picture lies at a place of the stage; may lie outside the picture. */
export function toImage(viewport: Viewport, point: StagePoint): ImagePoint {
  return imagePoint((point.x - viewport.offset.x) / viewport.scale, (point.y - viewport.offset.y) / viewport.scale)
}

/** The nearest place inside the picture, borders included. */
export function clampToPicture(picture: Size, point: ImagePoint): ImagePoint {
  return imagePoint(Math.min(Math.max(point.x, 0), picture.width), Math.min(Math.max(point.y, 0), picture.height))
}

function clampAxis(offset: number, stage: number, extent: number): number {
  if (extent <= stage) return (stage - extent) / 2
  const room = Math.min(EDGE_ROOM, extent - stage, stage / 3)
  return Math.min(Math.max(offset, stage - extent - room), room)
}

/** The same view with a scale between "all in sight" and `MAX_SCALE`, and the picture not pushed off the stage. */
export function clampViewport(viewport: Viewport): Viewport {
  const lowest = fitScale(viewport.stage, viewport.picture)
  const scale = Math.min(Math.max(viewport.scale, lowest), Math.max(MAX_SCALE, lowest))
  return {
    ...viewport,
    scale,
    offset: stagePoint(
      clampAxis(viewport.offset.x, viewport.stage.width, viewport.picture.width * scale),
      clampAxis(viewport.offset.y, viewport.stage.height, viewport.picture.height * scale),
    ),
  }
}

/**
 * Closer by `factor` (farther when below 1), with the place under `at` staying where it is as far as the limits allow.
 * @throws RangeError when `factor` is not positive.
 */
export function zoomAt(viewport: Viewport, at: StagePoint, factor: number): Viewport {
  if (!(factor > 0)) throw new RangeError(`zoom factor must be positive, got ${factor}`)
  const lowest = fitScale(viewport.stage, viewport.picture)
  const scale = Math.min(Math.max(viewport.scale * factor, lowest), Math.max(MAX_SCALE, lowest))
  const fixed = toImage(viewport, at)
  return clampViewport({ ...viewport, scale, offset: stagePoint(at.x - fixed.x * scale, at.y - fixed.y * scale) })
}

/** The picture moved by CSS pixels, within the limits. */
export function panBy(viewport: Viewport, dx: number, dy: number): Viewport {
  return clampViewport({ ...viewport, offset: stagePoint(viewport.offset.x + dx, viewport.offset.y + dy) })
}

/** The picture place in the middle of the stage stays there when the stage changes its size; a fitted picture stays fitted. */
export function resizeStage(viewport: Viewport, stage: Size): Viewport {
  if (isFitted(viewport)) return fitViewport(stage, viewport.picture)
  const middle = toImage(viewport, stagePoint(viewport.stage.width / 2, viewport.stage.height / 2))
  return clampViewport({
    ...viewport,
    stage,
    offset: stagePoint(stage.width / 2 - middle.x * viewport.scale, stage.height / 2 - middle.y * viewport.scale),
  })
}

/** Moves as little as needed to have `point` at least `room` CSS pixels from every edge of the stage. */
export function revealPoint(viewport: Viewport, point: { readonly x: number, readonly y: number }, room: number): Viewport {
  const at = toStage(viewport, point)
  const shift = (value: number, extent: number) => {
    const edge = Math.min(room, extent / 2)
    return Math.min(Math.max(value, edge), extent - edge) - value
  }
  return panBy(viewport, shift(at.x, viewport.stage.width), shift(at.y, viewport.stage.height))
}
