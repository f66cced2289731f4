import { expect } from 'vitest'
import type { Locator, Page } from 'playwright-core'
import { readFrameNumber } from '../fixtures/numbered/frame-number.mjs'
import { goTo } from './browser'

export interface Point { x: number, y: number }
export interface Size { width: number, height: number }

const PATIENCE_MS = 30_000
/** The picture of the bench, made small enough to carry over: cells of the burned-in number stay at least 9 pixels wide. */
const SAMPLE_SHORT_SIDE = 180

/** The marking bench as a person meets it: picture, filmstrip, panel. */
export function benchOf(page: Page, picture: Size) {
  const stage = page.getByRole('application')
  const canvas = stage.locator('canvas').first()
  const frameText = page.getByTestId('frame-number')
  const film = page.getByRole('slider', { name: 'Place in the clip' })

  /** The frame number that the bench shows. */
  async function shownFrame(): Promise<number> {
    return Number((await frameText.textContent())?.replace(/\D/g, ''))
  }

  async function waitForFrame(frame: number): Promise<void> {
    await expect.poll(async () => await frameText.getAttribute('aria-busy') === null ? await shownFrame() : -1, { timeout: PATIENCE_MS, interval: 15 }).toBe(frame)
  }

  /** Where a point of the picture lies in the window while the whole picture is in sight. */
  async function toWindow(point: Point): Promise<Point> {
    const box = await stage.boundingBox()
    if (!box) throw new Error('the stage is not to be seen')
    const scale = Math.min(box.width / picture.width, box.height / picture.height)
    return { x: box.x + (box.width - picture.width * scale) / 2 + point.x * scale, y: box.y + (box.height - picture.height * scale) / 2 + point.y * scale }
  }

  async function open(clipId: string, query = ''): Promise<void> {
    await goTo(page, `/clips/${clipId}${query}`)
    await ready()
  }

  /** The first frame is there. */
  async function ready(): Promise<void> {
    await canvas.waitFor()
    await expect.poll(() => frameText.getAttribute('aria-busy'), { timeout: PATIENCE_MS }).toBe(null)
  }

  return {
    stage, film, shownFrame, waitForFrame, toWindow, open, ready,

    /** Presses where a point of the picture lies. */
    async press(point: Point): Promise<void> {
      const { x, y } = await toWindow(point)
      await page.mouse.click(x, y)
    },

    async drag(from: Point, to: Point): Promise<void> {
      const [begin, end] = [await toWindow(from), await toWindow(to)]
      await page.mouse.move(begin.x, begin.y)
      await page.mouse.down()
      await page.mouse.move((begin.x + end.x) / 2, (begin.y + end.y) / 2)
      await page.mouse.move(end.x, end.y)
      await page.mouse.up()
    },

    /** Presses on the filmstrip, in the middle of the time for which a frame is shown. */
    async jump(frame: number, timesUs: readonly number[]): Promise<void> {
      const box = await film.boundingBox()
      if (!box) throw new Error('the filmstrip is not to be seen')
      const end = timesUs.at(-1) ?? 1
      const middle = ((timesUs[frame] ?? 0) + (timesUs[frame + 1] ?? end)) / 2
      // The last frame has no time of its own behind it on the strip: its very end is it.
      const x = frame === timesUs.length - 1 ? box.width - 0.5 : Math.min(box.width - 1, middle / end * box.width)
      await page.mouse.click(box.x + x, box.y + box.height / 3)
      if (frame === timesUs.length - 1) await page.keyboard.press('End')
    },

    /** Waits in the page until the bench says it shows a frame, and reads in the next moment that was painted what it says and what its canvas shows. */
    async readAt(frame: number): Promise<{ said: number, burned: number | null }> {
      const { said, data, width, height } = await canvas.evaluate(async (element, { clip, shortSide, wanted, patience }) => {
        if (!(element instanceof HTMLCanvasElement)) throw new Error('no canvas')
        const number = document.querySelector('[data-testid=frame-number]')
        const says = () => Number(number?.textContent?.replace(/\D/g, ''))
        const painted = () => new Promise(resolve => requestAnimationFrame(resolve))
        for (const end = performance.now() + patience; says() !== wanted || number?.hasAttribute('aria-busy');) {
          if (performance.now() > end) throw new Error(`the bench shows frame ${says()} instead of ${wanted}`)
          await painted()
        }
        await painted()
        const scale = Math.min(element.width / clip.width, element.height / clip.height)
        const shown = { width: clip.width * scale, height: clip.height * scale }
        const small = shortSide / Math.min(clip.width, clip.height)
        const sample = new OffscreenCanvas(Math.round(clip.width * small), Math.round(clip.height * small))
        const context = sample.getContext('2d', { willReadFrequently: true })
        if (!context) throw new Error('no context')
        context.drawImage(element, (element.width - shown.width) / 2, (element.height - shown.height) / 2, shown.width, shown.height, 0, 0, sample.width, sample.height)
        const { data: pixels } = context.getImageData(0, 0, sample.width, sample.height)
        let green = ''
        for (let at = 1; at < pixels.length; at += 4) green += String.fromCharCode(pixels[at] ?? 0)
        return { said: says(), data: btoa(green), width: sample.width, height: sample.height }
      }, { clip: { width: picture.width, height: picture.height }, shortSide: SAMPLE_SHORT_SIDE, wanted: frame, patience: PATIENCE_MS })
      return { said, burned: readFrameNumber({ data: Buffer.from(data, 'base64'), width, height, channels: 1 }) }
    },

    tab(name: 'Body map' | 'Readings' | 'List' | 'Picture'): Promise<void> {
      return page.getByRole('tab', { name }).click()
    },

    /** The field of a landmark's coordinate, in the list. */
    field(landmark: string, axis: 'x' | 'y'): Locator {
      return page.getByRole('textbox', { name: `${landmark}, ${axis}`, exact: true })
    },

    /** Types the coordinates of a landmark in the list, as they are. */
    async type(landmark: string, point: Point): Promise<void> {
      for (const axis of ['x', 'y'] as const) {
        const field = page.getByRole('textbox', { name: `${landmark}, ${axis}`, exact: true })
        await field.fill(String(point[axis]))
        await field.press('Enter')
      }
    },

    /** Types the ends of the plumb line or of the scale, on the tab of the picture. */
    async typeLine(title: 'Plumb line' | 'Scale', ends: Record<string, Point>): Promise<void> {
      const group = page.getByRole('group', { name: title })
      for (const [end, point] of Object.entries(ends)) {
        for (const axis of ['x', 'y'] as const) {
          const field = group.getByLabel(`${end} ${axis}`, { exact: true })
          await field.fill(String(point[axis]))
          await field.press('Enter')
        }
      }
    },

    /** A reading on the tab of the readings, as it is shown: `5° ± 2`. Both sides of a measure come one after the other. */
    async reading(name: string | RegExp, place = 0): Promise<string> {
      const words = typeof name === 'string' ? new RegExp(`^\\s*${name}\\s*$`) : name
      const item = page.getByRole('tabpanel').getByRole('listitem').filter({ has: page.getByText(words) }).nth(place)
      return (await item.locator('p').nth(1).textContent() ?? '').replace(/\s+/g, ' ').trim()
    },

    /** Saves and waits until the bench says that a version is kept. */
    async save(version: number): Promise<void> {
      await page.getByRole('button', { name: 'Save marking' }).click()
      await expect.poll(() => page.getByTestId('save-state').textContent(), { timeout: PATIENCE_MS }).toContain(`Saved, version ${version}`)
    },

    state: (): Promise<string | null> => page.getByTestId('save-state').textContent(),
  }
}

export type Bench = ReturnType<typeof benchOf>
