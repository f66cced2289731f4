import { mountSuspended } from '@nuxt/test-utils/runtime'
import { describe, expect, it } from 'vitest'
import { findLandmark } from '#shared/geometry/landmarks'
import { MarkingNext } from '#components'

const progress = { marked: 3, notVisible: 0, total: 5, position: 4, isCoreDone: false }

function mount(overrides = {}) {
  return mountSuspended(MarkingNext, {
    props: {
      next: findLandmark('lateralMalleolus'), then: findLandmark('fifthMetatarsal'), progress, completes: ['shankInclination', 'kneeFlexion'],
      isPlumbLineNext: false, isDrawingPlumbLine: false, setAfter: null, isAgain: false, askingReason: false, ...overrides,
    },
  })
}
type Next = Awaited<ReturnType<typeof mount>>
const press = (next: Next, name: string) => next.findAll('button').find(button => button.text() === name)?.trigger('click')

describe('MarkingNext', () => {
  it('names the landmark, where to find it, what it gives and what follows', async () => {
    const text = (await mount()).text()
    for (const part of ['Next, 4 of 5', 'Lateral malleolus', 'Centre of the bony bump on the outer ankle.', 'Gives Shank, Knee bend.', 'Then Fifth metatarsal.']) expect(text).toContain(part)
  })

  it('lets one pass it over or type it', async () => {
    const next = await mount()
    await press(next, 'Later')
    await press(next, 'Type x, y')
    expect(next.emitted('skip')).toHaveLength(1)
    expect(next.emitted('type')).toEqual([['lateralMalleolus']])
  })

  it('takes "not visible" only with a reason', async () => {
    const next = await mount({ askingReason: true })
    expect(next.findAll('button').find(button => button.text() === 'Set')?.attributes('disabled')).toBeDefined()
    await next.get('select').setValue('clothing')
    await next.get('form').trigger('submit')
    expect(next.emitted('hide')).toEqual([['clothing']])
  })

  it('asks for the plumb line once the main set is done', async () => {
    const next = await mount({ next: null, then: null, isPlumbLineNext: true })
    await press(next, 'Draw the plumb line')
    await press(next, 'Go on without')
    expect([next.emitted('plumbLine'), next.emitted('skipPlumbLine')]).toEqual([[[]], [[]]])
  })

  it('offers more of the body at the end of the main set, and ends when all is marked', async () => {
    const more = await mount({ next: null, then: null, setAfter: 'more' })
    expect(more.text()).toContain('The main set is marked')
    await press(more, 'Mark more of the body')
    expect(more.emitted('goOn')).toEqual([['more']])
    expect((await mount({ next: null, then: null })).text()).toContain('Everything is marked')
  })
})
