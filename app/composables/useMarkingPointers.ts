import { stagePoint } from '~/marking/viewport'
import type { useMarkingTools } from './useMarkingTools'
import type { useMarkingView } from './useMarkingView'

/** How near to a mark counts as on it, CSS pixels. */
const REACH: Readonly<Record<string, number>> = { mouse: 12, pen: 14, touch: 24 }
/** The very ring of a mark. */
const TIGHT_REACH = 7
/** A wheel notch of 100 zooms by this factor. */
const WHEEL_ZOOM = 1.2

/** A place on the stage, CSS pixels. */
interface Place { readonly x: number, readonly y: number }

function placeOf(event: PointerEvent | WheelEvent): Place {
  const box = event.currentTarget instanceof Element ? event.currentTarget.getBoundingClientRect() : { left: 0, top: 0 }
  return { x: event.clientX - box.left, y: event.clientY - box.top }
}

/** Fingers on the stage; two of them move the picture and zoom to the middle between them. */
function useFingers(view: ReturnType<typeof useMarkingView>) {
  const fingers = new Map<number, Place>()

  function pinch(id: number, now: Place) {
    const before = fingers.get(id)
    const other = [...fingers].find(([key]) => key !== id)?.[1]
    fingers.set(id, now)
    if (!before || !other) return
    const spread = Math.hypot(now.x - other.x, now.y - other.y)
    const spreadBefore = Math.max(1, Math.hypot(before.x - other.x, before.y - other.y))
    view.pan((now.x - before.x) / 2, (now.y - before.y) / 2)
    view.zoom(Math.max(0.2, spread / spreadBefore), stagePoint((now.x + other.x) / 2, (now.y + other.y) / 2))
  }

  return { fingers, pinch }
}

/** Mouse, pen and fingers on the stage: one draws, two zoom and move, the middle button moves, a wheel zooms to where it points. */
export function useMarkingPointers(view: ReturnType<typeof useMarkingView>, tools: ReturnType<typeof useMarkingTools>) {
  const { fingers, pinch } = useFingers(view)
  /** Where the pointer is; `null` when it is elsewhere. */
  const hover = shallowRef<(Place & { readonly type: string }) | null>(null)
  let moving: Place | null = null

  function forward(kind: 'onPointerDown' | 'onPointerMove' | 'onPointerUp', event: PointerEvent) {
    const { x, y } = placeOf(event)
    const at = view.toImage(x, y)
    const scale = view.viewport.value?.scale ?? 1
    if (at) tools.send(kind, at, (REACH[event.pointerType] ?? 12) / scale, TIGHT_REACH / scale)
  }

  function onDown(event: PointerEvent) {
    if (event.currentTarget instanceof Element) event.currentTarget.setPointerCapture(event.pointerId)
    fingers.set(event.pointerId, placeOf(event))
    hover.value = { ...placeOf(event), type: event.pointerType }
    if (fingers.size > 1) tools.cancel()
    else if (event.button === 1) moving = placeOf(event)
    else if (event.button === 0) forward('onPointerDown', event)
  }

  function onMove(event: PointerEvent) {
    const now = placeOf(event)
    hover.value = { ...now, type: event.pointerType }
    if (fingers.size > 1) return pinch(event.pointerId, now)
    if (!moving) return forward('onPointerMove', event)
    view.pan(now.x - moving.x, now.y - moving.y)
    moving = now
  }

  function onUp(event: PointerEvent) {
    if (fingers.size <= 1 && !moving) forward('onPointerUp', event)
    release(event)
  }

  function release(event: PointerEvent) {
    fingers.delete(event.pointerId)
    moving = null
    if (event.pointerType === 'touch') hover.value = null
  }

  /** The browser took the pointer away: the gesture never was. */
  function onLost(event: PointerEvent) {
    release(event)
    tools.cancel()
  }

  function onWheel(event: WheelEvent) {
    const { x, y } = placeOf(event)
    const notches = event.deltaMode === WheelEvent.DOM_DELTA_LINE ? event.deltaY / 3 : event.deltaY / 100
    view.zoom(WHEEL_ZOOM ** -notches, stagePoint(x, y))
  }

  function onLeave() {
    if (fingers.size === 0) hover.value = null
  }

  return { hover, onDown, onMove, onUp, onLost, onWheel, onLeave }
}
