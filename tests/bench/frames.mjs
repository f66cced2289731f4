import { interleave, report } from './measuring.mjs'

const STEPS = 40

/** Steps through the bench with the key and waits until the frame is painted. @returns milliseconds a step */
async function stepBench(page) {
  await page.keyboard.press('Home')
  await page.waitForFunction(() => document.querySelector('[data-testid=frame-number]')?.textContent?.replace(/\D/g, '') === '0')
  const from = performance.now()
  for (let frame = 1; frame <= STEPS; frame += 1) {
    await page.keyboard.press('ArrowRight')
    await page.waitForFunction((expected) => {
      const shown = document.querySelector('[data-testid=frame-number]')
      return shown?.textContent?.replace(/\D/g, '') === expected && shown.getAttribute('aria-busy') === null
    }, String(frame), { polling: 'raf' })
  }
  return (performance.now() - from) / STEPS
}

/** The same steps by seeking a plain `<video>` to the middle of each frame. @returns milliseconds a step */
async function stepVideo(page, timesUs) {
  await page.evaluate(() => { document.querySelector('video').currentTime = 0 })
  const from = performance.now()
  for (let frame = 1; frame <= STEPS; frame += 1) {
    const middle = (timesUs[frame] + (timesUs[frame + 1] ?? timesUs[frame] + 20_000)) / 2e6
    await page.evaluate(time => new Promise((resolve) => {
      const video = document.querySelector('video')
      video.requestVideoFrameCallback(() => requestAnimationFrame(resolve))
      video.currentTime = time
    }), middle)
  }
  return (performance.now() - from) / STEPS
}

/** A step to the painted frame on the bench beside plain seeking on the same review copy. */
export async function benchFrames(context, { baseUrl, clipId, timesUs }) {
  const [bench, plain] = [await context.newPage(), await context.newPage()]
  await bench.goto(`${baseUrl}/clips/${clipId}`)
  await bench.locator('canvas').first().waitFor()
  await bench.waitForFunction(() => document.querySelector('[data-testid=frame-number]')?.getAttribute('aria-busy') === null)
  await plain.goto(`${baseUrl}/icon.svg`)
  await plain.goto(`${baseUrl}/measures`)
  await plain.evaluate(id => new Promise((resolve) => {
    const video = Object.assign(document.createElement('video'), { src: `/api/clips/${id}/media`, muted: true, preload: 'auto', onloadeddata: resolve })
    document.body.replaceChildren(video)
  }), clipId)
  const result = await interleave(
    3,
    async () => { await bench.bringToFront(); return stepBench(bench) },
    async () => { await plain.bringToFront(); return stepVideo(plain, timesUs) },
  )
  report('a step to the painted frame on the bench beside plain video seeking', result, `${result.a.toFixed(0)} ms and ${result.b.toFixed(0)} ms`)
  await bench.close()
  await plain.close()
}
