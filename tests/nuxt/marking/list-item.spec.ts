import { mountSuspended } from '@nuxt/test-utils/runtime'
import { describe, expect, it } from 'vitest'
import { findLandmark } from '#shared/geometry/landmarks'
import { MarkingListItem } from '#components'

function heel() {
  const landmark = findLandmark('heel')
  if (!landmark) throw new Error('the catalogue has a heel')
  return landmark
}

function mount(overrides = {}) {
  return mountSuspended(MarkingListItem, {
    props: { landmark: heel(), point: null, hiddenBecause: null, picture: { width: 960, height: 720 }, isSelected: false, ...overrides },
  })
}
type Item = Awaited<ReturnType<typeof mount>>

async function type(item: Item, axis: 0 | 1, text: string) {
  const field = item.findAll('input')[axis]
  if (!field) throw new Error('there are two fields')
  // It fires `input` and `change`, as leaving the field does.
  await field.setValue(text)
}

describe('MarkingListItem', () => {
  it('places the landmark once both numbers are there, with point or comma', async () => {
    const item = await mount()
    await type(item, 0, '365.4')
    expect(item.emitted('place')).toBeUndefined()
    await type(item, 1, '659,5')
    expect(item.emitted('place')).toEqual([[{ x: 365.4, y: 659.5 }]])
  })

  it('refuses a place outside the picture and says the limits', async () => {
    const item = await mount()
    await type(item, 0, '961')
    await type(item, 1, '10')
    expect(item.emitted('place')).toBeUndefined()
    expect(item.get('[role=alert]').text()).toBe('x is a number from 0 to 960.')
  })

  it('refuses what is no number', async () => {
    const item = await mount()
    await type(item, 0, '10')
    await type(item, 1, 'NaN')
    expect(item.emitted('place')).toBeUndefined()
    expect(item.find('[role=alert]').exists()).toBe(true)
  })

  it('does not move a landmark whose field was only visited: what is shown is rounded', async () => {
    const item = await mount({ point: { x: 365.0583, y: 659.5629 } })
    const [x] = item.findAll('input')
    expect(x?.element.value).toBe('365.1')
    await x?.trigger('change')
    expect(item.emitted('place')).toBeUndefined()
  })

  it('keeps the coordinate that was not typed anew as exact as it was', async () => {
    const item = await mount({ point: { x: 365.0583, y: 659.5629 } })
    await type(item, 1, '660')
    expect(item.emitted('place')).toEqual([[{ x: 365.0583, y: 660 }]])
  })

  it('names its fields, so that they can be found and spoken', async () => {
    const item = await mount()
    expect(item.findAll('label').map(label => label.find('.sr-only').text())).toEqual(['Heel, x', 'Heel, y'])
  })

  it('says why a landmark is not visible and lets one take it back', async () => {
    const item = await mount({ hiddenBecause: 'support' })
    expect(item.text()).toContain('Not visible: Behind the support')
    await item.get('[aria-label="Heel is visible after all"]').trigger('click')
    expect(item.emitted('show')).toHaveLength(1)
  })

  it('shows a reason in words of a person\'s own as it is', async () => {
    const item = await mount({ hiddenBecause: 'blanket over the legs' })
    expect(item.text()).toContain('Not visible: blanket over the legs')
  })
})
