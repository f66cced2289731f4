import { interleave, load, report } from './measuring.mjs'

const BODIES = 4000

/** All sagittal readings with their bands, beside a bare loop that computes three angles alone. */
export async function benchGeometry() {
  const { measureMarking } = await load.import('../../shared/geometry/measure-marking.ts')
  const { WORKED_SAGITTAL } = await load.import('../reference/worked-values.ts')
  const body = { ...WORKED_SAGITTAL, plumbLine: { top: { x: 900, y: 100 }, bottom: { x: 900, y: 1000 } } }
  const rate = (work) => {
    const from = performance.now()
    for (let index = 0; index < BODIES; index += 1) work(index)
    return BODIES / (performance.now() - from) * 1000
  }
  const { acromion: a, greaterTrochanter: g, lateralEpicondyle: k, lateralMalleolus: m } = body.landmarks
  let sink = 0
  const bare = (index) => {
    const shift = index * 1e-6
    const trunk = Math.atan2(a.x + shift - g.x, g.y - a.y)
    const thigh = Math.atan2(k.x - g.x - shift, k.y - g.y)
    sink += trunk + thigh + Math.atan2(m.x - k.x, m.y - k.y)
  }
  const full = (index) => {
    const landmarks = { ...body.landmarks, acromion: { x: a.x + index * 1e-6, y: a.y } }
    sink += measureMarking({ ...body, landmarks }).readings.length
  }
  const result = await interleave(5, () => Promise.resolve(rate(full)), () => Promise.resolve(rate(bare)))
  report('measuring core, bodies a second, beside three bare angles', result, `${Math.round(result.a)} bodies/s with all readings and bands, ${Math.round(result.b)} bare`, `target 20000 bodies/s, sum ${Number.isFinite(sink)}`)
}
