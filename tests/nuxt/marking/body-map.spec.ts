import { mountSuspended } from '@nuxt/test-utils/runtime'
import { describe, expect, it } from 'vitest'
import { measureMarking } from '#shared/geometry/measure-marking'
import { MarkingBodyMap } from '#components'
import { EMPTY_DOCUMENT } from '~/marking/document'
import { guideOrder } from '~/marking/guide'
import { toMeasurable } from '~/marking/marking-body'

const PICTURE = { width: 1440, height: 1080 }
const document = {
  ...EMPTY_DOCUMENT,
  facing: 'right' as const,
  landmarks: { acromion: { x: 500, y: 260 }, greaterTrochanter: { x: 510, y: 520 }, lateralEpicondyle: { x: 516, y: 760 } },
  notVisible: { heel: 'support' },
}
const order = guideOrder('sagittal')

function mount(overrides = {}) {
  return mountSuspended(MarkingBodyMap, {
    props: {
      view: 'sagittal' as const,
      document,
      landmarks: [...order.core, ...order.more],
      next: 'lateralMalleolus',
      selected: null,
      readings: measureMarking(toMeasurable(document, 'sagittal', PICTURE)).readings,
      layout: 'column' as const,
      sideName: (side: string) => side,
      ...overrides,
    },
  })
}

describe('MarkingBodyMap', () => {
  it('says of each landmark whether it is marked, next, not visible or open', async () => {
    const map = await mount()
    const labels = map.findAll('[role=button]').map(joint => joint.attributes('aria-label'))
    expect(labels).toContain('Acromion, marked')
    expect(labels).toContain('Lateral malleolus, next')
    expect(labels).toContain('Heel, not visible')
    expect(labels).toContain('Tragus, not marked yet')
  })

  it('asks for a landmark by click, Enter and Space', async () => {
    const map = await mount()
    const joint = map.get('[aria-label="Tragus, not marked yet"]')
    await joint.trigger('click')
    await joint.trigger('keydown', { key: 'Enter' })
    await joint.trigger('keydown', { key: ' ' })
    expect(map.emitted('choose')).toEqual([['tragus'], ['tragus'], ['tragus']])
  })

  it('shows each reading that has its place on the body, with value, band and word', async () => {
    const map = await mount()
    const readings = map.findAll('li').map(item => item.text())
    expect(readings.some(text => /Trunk lean\s*−2° ± \d+/.test(text) && text.includes('Within'))).toBe(true)
    expect(readings.some(text => text.includes('Knee bend'))).toBe(false)
  })

  it('teaches what will be there while nothing is measured', async () => {
    const map = await mount({ readings: [] })
    expect(map.text()).toContain('Readings show here as you mark.')
  })

  it('has no buttons folded on a phone, where they would be too small', async () => {
    const map = await mount({ layout: 'strip' })
    expect(map.findAll('[role=button]')).toHaveLength(0)
    expect(map.get('svg').attributes('role')).toBe('img')
  })

  it('turns the outline for a person who faces left', async () => {
    const right = await mount()
    const left = await mount({ document: { ...document, facing: 'left' } })
    const x = (map: typeof right) => Number(map.get('[aria-label="Acromion, marked"] circle').attributes('cx'))
    expect(x(left)).toBeCloseTo(232 - x(right), 9)
  })
})
