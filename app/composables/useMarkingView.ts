import type { ImagePoint } from '#shared/geometry/point'
import { fitViewport, isFitted, panBy, resizeStage, revealPoint, stagePoint, toImage, zoomAt } from '~/marking/viewport'
import type { Size, StagePoint, Viewport } from '~/marking/viewport'

/** How the picture lies on the stage: zoom and pan. Never part of the marking. */
export function useMarkingView(picture: Size) {
  const viewport = shallowRef<Viewport | null>(null)

  function change(update: (viewport: Viewport) => Viewport) {
    if (viewport.value) viewport.value = update(viewport.value)
  }

  function setStage(stage: Size) {
    if (!(stage.width > 0 && stage.height > 0)) return
    viewport.value = viewport.value ? resizeStage(viewport.value, stage) : fitViewport(stage, picture)
  }

  function zoom(factor: number, at?: StagePoint) {
    change(view => zoomAt(view, at ?? stagePoint(view.stage.width / 2, view.stage.height / 2), factor))
  }

  return {
    viewport,
    setStage,
    zoom,
    isZoomed: computed(() => viewport.value !== null && !isFitted(viewport.value)),
    fit: () => change(view => fitViewport(view.stage, view.picture)),
    pan: (dx: number, dy: number) => change(view => panBy(view, dx, dy)),
    /** Shifts the picture by picture pixels. */
    moveView: (by: { readonly x: number, readonly y: number }) => change(view => panBy(view, by.x * view.scale, by.y * view.scale)),
    reveal: (point: { readonly x: number, readonly y: number }) => change(view => revealPoint(view, point, 64)),
    toImage: (x: number, y: number): ImagePoint | null => viewport.value && toImage(viewport.value, stagePoint(x, y)),
  }
}
