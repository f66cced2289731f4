import { readFile } from 'node:fs/promises'
import { makeBigClip } from '../fixtures/big/big-clip.mjs'
import { interleave, report } from './measuring.mjs'

const AT_ONCE = 4

async function putAll({ client, clipId, plan, bytes }) {
  const parts = []
  const numbers = Array.from({ length: plan.partCount }, (_, index) => index + 1)
  await Promise.all(Array.from({ length: AT_ONCE }, async () => {
    for (let number = numbers.shift(); number !== undefined; number = numbers.shift()) {
      const { parts: [{ url }] } = await client.post(`/api/clips/${clipId}/upload/parts`, { partNumbers: [number] })
      const answer = await fetch(url, { method: 'PUT', body: bytes.subarray((number - 1) * plan.partSize, number * plan.partSize) })
      if (!answer.ok) throw new Error(`part ${number}: ${answer.status}`)
      parts.push({ partNumber: number, etag: answer.headers.get('etag') })
    }
  }))
  return parts.sort((a, b) => a.partNumber - b.partNumber)
}

/** Uploads a file as a script does. @returns the clip's id */
export async function uploadWhole(client, sessionId, made) {
  const bytes = await readFile(made.path)
  const { clip, upload } = await client.post(`/api/sessions/${sessionId}/clips`, { fileName: made.fileName, size: bytes.length, contentType: made.contentType, view: 'sagittal', side: 'left' })
  const parts = await putAll({ client, clipId: clip.id, plan: upload, bytes })
  await client.post(`/api/clips/${clip.id}/upload/complete`, { parts })
  return clip.id
}

async function byScript({ client, sessionId }, made) {
  const from = performance.now()
  await uploadWhole(client, sessionId, made)
  return performance.now() - from
}

async function byBrowser({ context, baseUrl, sessionId }, made) {
  const page = await context.newPage()
  await page.goto(`${baseUrl}/sessions/${sessionId}`, { waitUntil: 'networkidle' })
  await page.locator('input[type=file][multiple]').setInputFiles(made.path)
  const send = page.getByRole('button', { name: /^Send/ })
  await send.waitFor()
  const completed = page.waitForResponse(answer => answer.url().endsWith('/upload/complete') && answer.ok(), { timeout: 300_000 })
  const from = performance.now()
  await send.click()
  await completed
  const took = performance.now() - from
  await page.close({ runBeforeUnload: false })
  return took
}

/** 300 MB through the browser beside the same parts sent by a script, from the first request to the completed upload. */
export async function benchUpload(place) {
  const made = await makeBigClip()
  const result = await interleave(2, () => byBrowser(place, made), () => byScript(place, made))
  report('300 MB through the browser beside a script', result, `${(result.a / 1000).toFixed(1)} s and ${(result.b / 1000).toFixed(1)} s`, 'target at most 1.5')
}
