import { framesToPrepare } from '~/marking/frames/frame-cache'
import { clampFrame } from '~/marking/frames/frame-table'
import type { FrameTable } from '~/marking/frames/frame-table'
import type { FramePicture } from './useFrameDecoder'

export interface FrameSourceOptions {
  readonly clipId: string
  readonly table: FrameTable
  /** Size of the review copy, pixels. */
  readonly width: number
  readonly height: number
}

/** Memory for decoded frames, bytes; a frame takes four bytes a pixel. */
const CACHE_BYTES = 170_000_000

interface Job { readonly frame: number, readonly isRunUp: boolean, readonly isWaitedFor: boolean }

/** Runs one job after the other until there is none; a call while it runs changes nothing. */
function createWorker(next: () => Job | null, run: (job: Job) => Promise<void>, onIdle: () => void) {
  let isWorking = false
  return async function work() {
    if (isWorking) return
    isWorking = true
    try {
      for (let job = next(); job; job = next()) await run(job)
    } finally {
      isWorking = false
    }
    onIdle()
  }
}

/**
 * Frames of one clip, exact to the frame. `show` asks for a frame, `shown` is the one that is there: picture and
 * number change together, so that a counter bound to `shown` never runs ahead of the picture. Only the newest wish
 * counts; frames around it are decoded ahead in the direction of the last step.
 */
export function useFrameSource({ clipId, table, width, height }: FrameSourceOptions) {
  const capacity = Math.min(80, Math.max(8, Math.floor(CACHE_BYTES / (width * height * 4))))
  const shelf = useFrameShelf(capacity)
  const reader = useFrameReader(clipId, { table, has: shelf.has, onPicture })
  const { shown } = shelf
  const wanted = ref(0)
  const failure = shallowRef<unknown>(null)
  /** While the clip plays, a late frame is better than none. */
  const isRolling = ref(false)
  const unreadable = new Set<number>()
  let direction: 1 | -1 = 1
  // Without the copy in memory the clip goes on by ranges.
  const work = createWorker(nextJob, readJob, once(() => void reader.keep().then(null, () => null)))

  function onPicture(picture: FramePicture) {
    shelf.keep(picture.frame, picture.image, wanted.value)
    const isLate = isRolling.value && picture.frame < wanted.value && picture.frame > (shown.value?.frame ?? -1)
    if (picture.frame === wanted.value || isLate) shelf.present(picture)
  }

  function nextJob(): Job | null {
    if (failure.value !== null || reader.isClosed()) return null
    if (!shelf.has(wanted.value)) return { frame: wanted.value, isRunUp: false, isWaitedFor: true }
    if (reader.mode.value !== 'decoder') return null
    const isThere = (frame: number) => shelf.has(frame) || unreadable.has(frame)
    const [frame] = framesToPrepare(wanted.value, table.timesUs.length, direction, Math.floor(capacity / 2) - 1, Math.floor(capacity / 4), isThere)
    return frame === undefined ? null : { frame, isRunUp: frame < wanted.value, isWaitedFor: false }
  }

  async function readJob({ frame, isRunUp, isWaitedFor }: Job) {
    const goesOn = () => isWaitedFor ? frame === wanted.value : shelf.has(wanted.value)
    try {
      await reader.read(frame, { isRunUp, isWaitedFor, goesOn })
    } catch (error) {
      if (!isWaitedFor) unreadable.add(frame)
      else if (frame === wanted.value) failure.value = error
    }
  }

  /** Asks for a frame; numbers outside the clip mean its ends. */
  function show(frame: number) {
    const next = clampFrame(table, frame)
    if (next !== wanted.value) direction = next > wanted.value ? 1 : -1
    wanted.value = next
    failure.value = null
    shelf.presentKept(next)
    void work()
  }

  onScopeDispose(reader.close)
  return {
    shown, wanted: readonly(wanted), isRolling, mode: reader.mode,
    /** What kept the wanted frame from coming, or `null`. */
    failure,
    isWaiting: computed(() => failure.value === null && shown.value?.frame !== wanted.value),
    show,
    retry: () => show(wanted.value),
  }
}

function once(run: () => void): () => void {
  let isDone = false
  return () => {
    if (isDone) return
    isDone = true
    run()
  }
}
