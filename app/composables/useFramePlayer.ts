import { clampFrame, frameAtTime, timeOfFrame } from '~/marking/frames/frame-table'
import type { FrameTable } from '~/marking/frames/frame-table'
import type { useFrameSource } from './useFrameSource'

/** Steps, jumps and plays through a clip. Time is that of the frames, never a count over a nominal rate. */
export function useFramePlayer(table: FrameTable, source: ReturnType<typeof useFrameSource>) {
  const isPlaying = ref(false)
  /** 1 is the speed at which it was recorded. */
  const rate = ref(1)
  const lastFrame = table.timesUs.length - 1
  const frame = computed(() => source.shown.value?.frame ?? source.wanted.value)
  const timeUs = computed(() => timeOfFrame(table, frame.value))
  let handle = 0
  let startedAt = 0
  let startedFrom = 0

  function goTo(next: number) {
    pause()
    source.show(next)
  }

  /** Steps add up while a frame is still on its way. */
  function step(by: number) {
    pause()
    source.show(clampFrame(table, source.wanted.value + by))
  }

  function tick(now: number) {
    const target = startedFrom + (now - startedAt) * 1000 * rate.value
    source.show(frameAtTime(table, target))
    if (source.failure.value !== null || (frame.value === lastFrame && target > timeOfFrame(table, lastFrame))) pause()
    else handle = requestAnimationFrame(tick)
  }

  function play() {
    if (lastFrame === 0 || isPlaying.value) return
    if (frame.value === lastFrame) source.show(0)
    isPlaying.value = true
    source.isRolling.value = true
    startedAt = performance.now()
    startedFrom = timeOfFrame(table, source.wanted.value)
    handle = requestAnimationFrame(tick)
  }

  /** Stops at the frame in sight. */
  function pause() {
    if (!isPlaying.value) return
    isPlaying.value = false
    source.isRolling.value = false
    cancelAnimationFrame(handle)
    source.show(frame.value)
  }

  function setRate(next: number) {
    startedFrom = timeOfFrame(table, frame.value)
    startedAt = performance.now()
    rate.value = next
  }

  onScopeDispose(() => cancelAnimationFrame(handle))

  return { frame, timeUs, lastFrame, isPlaying: readonly(isPlaying), rate: readonly(rate), goTo, step, play, pause, setRate, togglePlay: () => isPlaying.value ? pause() : play() }
}
