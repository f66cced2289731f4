import { createFrameCache } from '~/marking/frames/frame-cache'
import type { FramePicture } from './useFrameDecoder'

/** Decoded frames near the one in sight, and the one in sight itself. Each picture is freed once nothing shows it any more. */
export function useFrameShelf(capacity: number) {
  const shown = shallowRef<FramePicture | null>(null)
  const cache = createFrameCache<ImageBitmap>(capacity, (image) => {
    // The picture on the screen is freed only after another has taken its place.
    if (shown.value?.image !== image) image.close()
  })

  function present(picture: FramePicture) {
    const before = shown.value
    if (before?.image === picture.image) return
    shown.value = picture
    if (before && cache.get(before.frame) !== before.image) afterPaint(() => before.image.close())
  }

  /** Shows a frame that is there. @returns whether it was. */
  function presentKept(frame: number): boolean {
    const image = cache.get(frame)
    if (image) present({ frame, image })
    return image !== undefined
  }

  onScopeDispose(() => {
    const last = shown.value
    shown.value = null
    if (last && cache.get(last.frame) !== last.image) last.image.close()
    cache.clear()
  })

  return { shown, has: cache.has, keep: cache.put, present, presentKept }
}

function afterPaint(run: () => void) {
  requestAnimationFrame(() => requestAnimationFrame(run))
}
