import { mountSuspended } from '@nuxt/test-utils/runtime'
import { describe, expect, it } from 'vitest'
import { measureMarking } from '#shared/geometry/measure-marking'
import { MarkingConflict } from '#components'
import { EMPTY_DOCUMENT } from '~/marking/document'
import { toMarkingFields, toMeasurable } from '~/marking/marking-body'

const PICTURE = { width: 1440, height: 1080 }
const mine = { ...EMPTY_DOCUMENT, facing: 'right' as const, landmarks: { acromion: { x: 500, y: 260 }, greaterTrochanter: { x: 510, y: 520 } } }
const other = { ...mine, landmarks: { ...mine.landmarks, acromion: { x: 560, y: 260 }, heel: { x: 470, y: 1010 } } }
const readingsOf = (document: typeof mine) => measureMarking(toMeasurable(document, 'sagittal', PICTURE)).readings

function mount() {
  const theirs = {
    id: '01900000-0000-7000-8000-000000000001', stillId: '01900000-0000-7000-8000-000000000002', version: 3, status: 'final' as const,
    author: { id: '01900000-0000-7000-8000-000000000003', name: 'Ines Okafor' }, savedAt: '2026-11-27T10:40:00.000Z',
    body: toMarkingFields(other, 'sagittal'), readings: readingsOf(other).map(reading => ({ ...reading, warnings: [...reading.warnings] })),
  }
  return mountSuspended(MarkingConflict, { props: { theirs, mine: readingsOf(mine), document: mine, isBusy: false } })
}

describe('MarkingConflict', () => {
  it('shows the readings of both versions side by side and how many landmarks differ', async () => {
    const conflict = await mount()
    const row = conflict.findAll('tbody tr').find(candidate => candidate.text().includes('Trunk lean'))
    expect(row?.findAll('td').map(cell => cell.text().slice(0, 3))).toEqual(['−2°', '11°'])
    expect(conflict.text()).toContain('2 landmarks differ.')
  })

  it('lets the person keep theirs, take the other or put it off', async () => {
    const conflict = await mount()
    for (const name of ['Save mine as version 4', 'Go on from theirs', 'Decide later']) await conflict.findAll('button').find(button => button.text().includes(name))?.trigger('click')
    expect([conflict.emitted('mine'), conflict.emitted('theirs'), conflict.emitted('later')]).toEqual([[[]], [[]], [[]]])
  })
})
