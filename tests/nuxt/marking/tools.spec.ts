import { describe, expect, it } from 'vitest'
import { computed, ref, shallowRef } from 'vue'
import { imagePoint } from '#shared/geometry/point'
import { applyCommand, type MarkingCommand } from '~/marking/commands/marking-command'
import { EMPTY_DOCUMENT, type MarkingDocument } from '~/marking/document'
import { useMarkingNudge } from '~/composables/useMarkingNudge'
import { useMarkingReadings } from '~/composables/useMarkingReadings'
import { useMarkingTools } from '~/composables/useMarkingTools'

const PICTURE = { width: 1440, height: 1080 }

function setUp(start: MarkingDocument | null = EMPTY_DOCUMENT) {
  const document = shallowRef<MarkingDocument | null>(start)
  const preview = shallowRef<MarkingCommand | null>(null)
  const target = ref<string | null>('acromion')
  const done: MarkingCommand[] = []
  function run(command: MarkingCommand) {
    done.push(command)
    if (document.value) document.value = applyCommand(document.value, command)
  }
  const moves: unknown[] = []
  const tools = useMarkingTools({ picture: PICTURE, document, target, preview, run, moveView: by => moves.push(by) })
  const nudging = useMarkingNudge({ picture: PICTURE, document, preview, run })
  const shown = computed(() => document.value && preview.value ? applyCommand(document.value, preview.value) : document.value)
  const readings = useMarkingReadings('sagittal', PICTURE, document, shown)
  const drag = (from: readonly [number, number], to: readonly [number, number]) => {
    tools.send('onPointerDown', imagePoint(...from), 12, 6)
    tools.send('onPointerMove', imagePoint(...to), 12, 6)
    tools.send('onPointerUp', imagePoint(...to), 12, 6)
  }
  return { document, preview, target, done, moves, tools, nudging, readings, drag }
}

describe('useMarkingTools', () => {
  it('does one command a gesture and shows it before', () => {
    const { tools, preview, done, document } = setUp()
    tools.send('onPointerDown', imagePoint(10, 10), 12, 6)
    tools.send('onPointerMove', imagePoint(20, 20), 12, 6)
    expect(preview.value).toMatchObject({ type: 'landmark.place', point: { x: 20, y: 20 } })
    expect(document.value).toEqual(EMPTY_DOCUMENT)
    tools.send('onPointerUp', imagePoint(20, 20), 12, 6)
    expect(preview.value).toBeNull()
    expect(done).toHaveLength(1)
    expect(tools.selected.value).toBe('acromion')
  })

  it('drops the gesture when the tool changes', () => {
    const { tools, preview, done } = setUp()
    tools.send('onPointerDown', imagePoint(10, 10), 12, 6)
    tools.choose('scale')
    tools.send('onPointerUp', imagePoint(20, 20), 12, 6)
    expect([preview.value, done.length, tools.stateId.value]).toEqual([null, 0, 'scale.idle'])
  })

  it('goes back to landmarks once the plumb line is drawn, and tells when it is too short', () => {
    const { tools, done, drag } = setUp()
    tools.choose('plumb-line')
    drag([100, 100], [100, 200])
    expect([tools.notice.value, tools.toolId.value, done.length]).toEqual(['plumb-line-too-short', 'plumb-line', 0])
    drag([100, 100], [100, 900])
    expect([tools.notice.value, tools.toolId.value, done.length]).toEqual([null, 'landmark', 1])
  })

  it('only moves the picture where there is no marking', () => {
    const { tools, done, moves } = setUp(null)
    tools.send('onPointerDown', imagePoint(10, 10), 12, 6)
    tools.send('onPointerMove', imagePoint(30, 15), 12, 6)
    tools.send('onPointerUp', imagePoint(30, 15), 12, 6)
    expect([done, moves]).toEqual([[], [{ x: 20, y: 5 }]])
  })
})

describe('useMarkingNudge', () => {
  const marked = { ...EMPTY_DOCUMENT, landmarks: { heel: { x: 100, y: 100 } } }

  it('adds up while the key is held and is one command when it is let go', () => {
    const { nudging, document, done } = setUp(marked)
    for (let press = 0; press < 3; press++) nudging.nudge('heel', 0.1, 0)
    nudging.nudge('heel', 0, -10)
    expect(document.value).toEqual(marked)
    nudging.settle()
    expect(done).toHaveLength(1)
    expect(document.value?.landmarks.heel).toEqual({ x: 100.3, y: 90 })
  })

  it('stops at the border of the picture', () => {
    const { nudging, document } = setUp({ ...EMPTY_DOCUMENT, landmarks: { heel: { x: 1439.5, y: 3 } } })
    nudging.nudge('heel', 10, -10)
    nudging.settle()
    expect(document.value?.landmarks.heel).toEqual({ x: 1440, y: 0 })
  })

  it('does nothing to a landmark that is not there', () => {
    const { nudging, done } = setUp()
    nudging.nudge('heel', 1, 0)
    nudging.settle()
    expect(done).toEqual([])
  })
})

describe('useMarkingReadings', () => {
  const standing = { ...EMPTY_DOCUMENT, facing: 'right' as const, landmarks: { acromion: { x: 500, y: 260 }, greaterTrochanter: { x: 510, y: 520 } } }
  const trunk = (readings: ReturnType<typeof setUp>['readings']) => readings.readings.value.find(reading => reading.measure === 'trunkInclination')?.value

  it('follows a drag live and returns when it is dropped', () => {
    const { tools, readings } = setUp(standing)
    const before = trunk(readings)
    tools.send('onPointerDown', imagePoint(500, 260), 12, 6)
    tools.send('onPointerMove', imagePoint(560, 260), 12, 6)
    expect(trunk(readings)).toBeCloseTo(10.8855, 3)
    tools.cancel()
    expect(trunk(readings)).toBe(before)
  })

  it('keeps the readings while a plumb line is drawn that is still too short', () => {
    const { tools, readings } = setUp(standing)
    tools.choose('plumb-line')
    tools.send('onPointerDown', imagePoint(1000, 100), 12, 6)
    tools.send('onPointerMove', imagePoint(1000, 150), 12, 6)
    expect(trunk(readings)).toBeCloseTo(-2.2026, 3)
    expect(readings.fault.value).toBeNull()
  })

  it('names what keeps a marking from being measured', () => {
    const { readings } = setUp({ ...standing, facing: null })
    expect(readings.fault.value?.code).toBe('facing-required')
    expect(readings.readings.value).toEqual([])
  })
})
