/**
 * Renders the clips of the demo clinic into `clips/`, with the truth of the frames that get marked in `truth.json`.
 * They are kept in the repository; run this again after a change of the drawing or of `clip-list.mjs`.
 *
 *     node docker-local/demo/make-clips.mjs [part of a file name]
 */
import { existsSync, mkdirSync, readFileSync, statSync, writeFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { setDisplayTurn } from '../../tests/fixtures/container/boxes.mjs'
import { encodeFrames, paintFrames, sway } from '../../tests/fixtures/figure/film.mjs'
import { CLIPS } from './clip-list.mjs'

const at = name => fileURLToPath(new URL(name, import.meta.url))
const ENCODERS = {
  h264: ['-c:v', 'libx264', '-preset', 'slow', '-crf', '21', '-pix_fmt', 'yuv420p', '-movflags', '+faststart'],
  // A phone stores its sideways sensor picture and a note how to turn it.
  hevc: ['-vf', 'transpose=2', '-c:v', 'libx265', '-preset', 'medium', '-crf', '24', '-pix_fmt', 'yuv420p', '-tag:v', 'hvc1', '-x265-params', 'log-level=error'],
}

/** Angles at `seconds` between key poses, eased. */
function poseBetween(keys, seconds) {
  const next = keys.findIndex(([time]) => time > seconds)
  if (next === -1) return keys.at(-1)[1]
  const [[from, before], [to, after]] = [keys[Math.max(0, next - 1)], keys[next]]
  const share = to === from ? 1 : (seconds - from) / (to - from)
  const eased = share * share * (3 - 2 * share)
  return Object.fromEntries(Object.keys(after).map(name => [name, before[name] + (after[name] - before[name]) * eased]))
}

/** The pose of a clip over time: key poses, or a stand that sways around the angles of its first marked frame. */
function poseOf(clip, seed) {
  if (clip.keys) return seconds => poseBetween(clip.keys, seconds)
  const names = Object.keys(clip.pose)
  const drift = (name, seconds) => (clip.sway[name] ?? 0) * sway(seconds, seed * 17 + names.indexOf(name))
  const marked = clip.marked[0] / clip.fps
  return seconds => Object.fromEntries(names.map(name => [name, clip.pose[name] + drift(name, seconds) - drift(name, marked)]))
}

const rounded = value => typeof value === 'number'
  ? Math.round(value * 1000) / 1000
  : Array.isArray(value) ? value.map(rounded) : value && typeof value === 'object' ? Object.fromEntries(Object.entries(value).map(([key, entry]) => [key, rounded(entry)])) : value

function turnOnDisplay(path, stored) {
  const bytes = readFileSync(path)
  setDisplayTurn(bytes, 90, stored)
  writeFileSync(path, bytes)
}

async function makeClip(file, clip, seed) {
  const { width, height, fps, seconds, camera, marked, codec = 'h264' } = clip
  const frames = Math.round(seconds * fps)
  const request = { view: clip.view, person: clip.person, facing: clip.facing, scene: clip.scene, frame: clip.frame, helper: clip.helper, bench: clip.bench, camera: { width, height, ...camera } }
  const painted = paintFrames({ frames, fps, request, poseAt: poseOf(clip, seed) })
  const truths = await encodeFrames(painted, { width, height, fps, output: at(`clips/${file}`), encoder: ENCODERS[codec] })
  if (clip.turned) turnOnDisplay(at(`clips/${file}`), { width: height, height: width })
  const kept = codec === 'hevc' ? [0, frames - 1] : marked
  return { frames, fps, stills: Object.fromEntries(kept.map(frame => [frame, rounded(truths[frame])])) }
}

const wanted = process.argv[2] ?? ''
mkdirSync(at('clips'), { recursive: true })
const truth = existsSync(at('truth.json')) ? JSON.parse(readFileSync(at('truth.json'), 'utf8')) : {}
const began = Date.now()
let painted = 0
for (const [index, [file, clip]] of Object.entries(CLIPS).entries()) {
  if (!file.includes(wanted)) continue
  const start = Date.now()
  truth[file] = await makeClip(file, clip, index)
  painted += truth[file].frames
  process.stdout.write(`${file}: ${truth[file].frames} frames, ${Math.round(statSync(at(`clips/${file}`)).size / 1024)} kB, ${((Date.now() - start) / 1000).toFixed(1)} s\n`)
}
const ordered = Object.fromEntries(Object.keys(CLIPS).filter(file => truth[file]).map(file => [file, truth[file]]))
writeFileSync(at('truth.json'), `{\n${Object.entries(ordered).map(([file, entry]) => `${JSON.stringify(file)}: ${JSON.stringify(entry)}`).join(',\n')}\n}\n`)
process.stdout.write(`${painted} frames in ${((Date.now() - began) / 1000).toFixed(1)} s\n`)
