import { execFile } from 'node:child_process'
import { copyFile, mkdtemp, readFile, rm } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { promisify } from 'node:util'
import { makeHeavyClip } from '../fixtures/big/big-clip.mjs'
import { interleave, load, report } from './measuring.mjs'

const run = promisify(execFile)

/** One run of ffmpeg with the job's own settings, and nothing around it. @returns milliseconds */
async function bareRun(folder, args) {
  const from = performance.now()
  await run('ffmpeg', ['-y', ...args], { cwd: folder, maxBuffer: 1 << 26 })
  return performance.now() - from
}

/** The whole job on the worker: fetch, probe, encode, decode every frame, poster, filmstrip, keep. @returns milliseconds as the worker logs them */
async function jobRun({ client, sessionId, log }, made, uploadWhole) {
  const clipId = await uploadWhole(client, sessionId, made)
  for (;;) {
    const line = (await readFile(log, 'utf8')).split('\n').find(one => one.includes(clipId) && one.includes('clip processed'))
    if (line) return JSON.parse(line).ms
    await new Promise(resolve => setTimeout(resolve, 250))
  }
}

/** The review-copy job beside bare ffmpeg with the same settings. */
export async function benchReviewCopy(place, uploadWhole) {
  const made = await makeHeavyClip({ seconds: 20 })
  const { probeArguments } = await load.import('../../server/adapters/media-arguments.ts')
  const { parseProbe } = await load.import('../../server/adapters/media-probe.ts')
  const { planPicture, reviewArguments } = await load.import('../../server/adapters/media-review.ts')
  const folder = await mkdtemp(join(tmpdir(), 'standmark-bench-'))
  try {
    await copyFile(made.path, join(folder, 'in'))
    const { stdout } = await run('ffprobe', probeArguments('in'), { cwd: folder })
    const { video } = parseProbe(stdout)
    const args = reviewArguments(video, planPicture(video), { from: 'in', to: 'out.mp4' }, { seconds: 601, frames: 36_001, threads: 2 })
    const result = await interleave(3, () => jobRun(place, made, uploadWhole), () => bareRun(folder, args))
    report('review-copy job beside bare ffmpeg', result, `job ${(result.a / 1000).toFixed(1)} s, ffmpeg ${(result.b / 1000).toFixed(1)} s for a clip of 20 s`, 'target at most 1.3')
  } finally {
    await rm(folder, { recursive: true, force: true })
  }
}
