import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { effectScope, type EffectScope } from 'vue'
import { useFrameShelf } from '~/composables/useFrameShelf'

/** Stands for a decoded picture: all that the shelf does with one is to free it. */
class Picture implements ImageBitmap {
  isClosed = false
  constructor(readonly width = 4, readonly height = 3) {}
  close() { this.isClosed = true }
}
const painted = () => new Promise(resolve => requestAnimationFrame(() => requestAnimationFrame(() => requestAnimationFrame(resolve))))

let scope: EffectScope
beforeEach(() => { scope = effectScope() })
afterEach(() => scope.stop())

function makeShelf(capacity: number) {
  const shelf = scope.run(() => useFrameShelf(capacity))
  if (!shelf) throw new Error('the scope is open')
  return shelf
}

describe('useFrameShelf', () => {
  it('changes picture and number together', () => {
    const shelf = makeShelf(3)
    const image = new Picture()
    shelf.keep(7, image, 7)
    expect(shelf.shown.value).toBeNull()
    expect(shelf.presentKept(7)).toBe(true)
    expect(shelf.shown.value).toEqual({ frame: 7, image })
    expect(shelf.presentKept(8)).toBe(false)
    expect(shelf.shown.value?.frame).toBe(7)
  })

  it('never frees the picture that is shown, and frees it after the next one took its place', async () => {
    const shelf = makeShelf(2)
    const shown = new Picture()
    shelf.keep(1, shown, 1)
    shelf.presentKept(1)
    for (const frame of [50, 51, 52]) shelf.keep(frame, new Picture(), 51)
    expect(shown.isClosed).toBe(false)
    shelf.presentKept(51)
    await painted()
    expect(shown.isClosed).toBe(true)
  })

  it('frees everything when the bench is left', () => {
    const pictures = [new Picture(), new Picture()]
    const shelf = makeShelf(5)
    pictures.forEach((picture, frame) => shelf.keep(frame, picture, 0))
    shelf.presentKept(0)
    scope.stop()
    expect(pictures.map(picture => picture.isClosed)).toEqual([true, true])
  })
})
