import { mountSuspended } from '@nuxt/test-utils/runtime'
import { describe, expect, it } from 'vitest'
import { MarkingFilmstrip } from '#components'
import { createFrameTable } from '~/marking/frames/frame-table'

/** 2 s at 25 frames a second, then a gap: the last frame stands at 4 s. */
const table = createFrameTable([...Array.from({ length: 51 }, (_, frame) => frame * 40_000), 4_000_000])

function still(frame: number, isMarked: boolean) {
  const markings = isMarked ? [{ id: `m${frame}`, version: 1, status: 'final' as const, author: 'A', savedAt: '2026-11-27T10:00:00.000Z' }] : []
  return { id: `s${frame}`, clipId: 'c', frame, timeUs: table.timesUs[frame] ?? 0, width: 960, height: 720, markings }
}

function mount(overrides = {}) {
  return mountSuspended(MarkingFilmstrip, {
    props: { table, frame: 25, stills: [], filmstrip: null, spriteUrl: '/strip', timeText: (timeUs: number) => `${timeUs / 1_000_000} s`, ...overrides },
  })
}

describe('MarkingFilmstrip', () => {
  it('is a slider over the frames that tells time and frame', async () => {
    const slider = (await mount()).get('[role=slider]')
    expect(slider.attributes()).toMatchObject({ 'aria-valuemin': '0', 'aria-valuemax': '51', 'aria-valuenow': '25', 'aria-valuetext': '1 s, frame 25' })
  })

  it('stands where the frame is in time, not where its number is', async () => {
    const line = (await mount({ frame: 50 })).get('.filmstrip-line')
    expect(line.attributes('style')).toContain('left: 50.000%')
  })

  it('goes to a still by its dot, which says whether it is marked', async () => {
    const strip = await mount({ stills: [still(5, false), still(51, true)] })
    // Without a width, as here, all stills count as near to each other.
    const [dot] = strip.findAll('.filmstrip-still')
    expect(dot?.attributes('aria-label')).toBe('2 stills from 0.2 s to 4 s')
    await dot?.trigger('click')
    expect(strip.emitted('seek')).toEqual([[51]])
  })

  it('names a lone still', async () => {
    const marked = await mount({ stills: [still(25, true)] })
    expect(marked.get('.filmstrip-still').attributes()).toMatchObject({ 'aria-label': 'Still at 1 s, marked', 'aria-current': 'true' })
    const picked = await mount({ stills: [still(5, false)] })
    expect(picked.get('.filmstrip-still').attributes('aria-label')).toBe('Still at 0.2 s, not marked yet')
  })
})
