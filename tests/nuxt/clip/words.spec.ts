import { mountSuspended } from '@nuxt/test-utils/runtime'
import { describe, expect, it } from 'vitest'
import { ClipUploadFile, ClipUploadItem } from '#components'
import { CLIP_REFUSALS } from '#shared/schemas/clip'
import type { UploadEntry } from '~/stores/useUploadStore'
import { UploadProblem } from '~/upload/upload-network'
import { newStatus, type UploadStatus } from '~/upload/upload-state'

function anEntry(status: Partial<UploadStatus>, rate: number | null = null): UploadEntry {
  return { id: 'a', fileName: 'stand.mp4', sessionId: 's', patientId: 'p', clipId: 'c', rate, status: { ...newStatus(100_000_000), ...status } }
}
const textOf = async (entry: UploadEntry) => (await mountSuspended(ClipUploadItem, { props: { entry } })).text().replace(/\s+/g, ' ')

describe('an upload in words', () => {
  it.each(CLIP_REFUSALS)('says why a clip is refused and what to do: %s', async (reason) => {
    const text = await textOf(anEntry({ phase: 'refused', reason }))
    expect(text).not.toContain('clip.refused')
    // The reason, and after it the next step; a withdrawn consent leaves nothing to do.
    expect(text.split('. ').length).toBeGreaterThan(reason === 'consent-withdrawn' ? 0 : 1)
  })

  it.each([['offline', 'No network'], ['signed-out', 'You are signed out'], ['retrying', 'The connection is shaky']] as const)('says why nothing moves: %s', async (pause, words) => {
    expect(await textOf(anEntry({ phase: 'sending', pause }))).toContain(words)
  })

  it('tells bytes, rate and time only as far as they are known', async () => {
    expect(await textOf(anEntry({ phase: 'sending', sentBytes: 25_000_000 }))).toContain('25 MB of 100 MB')
    const text = await textOf(anEntry({ phase: 'sending', sentBytes: 25_000_000 }, 1_000_000))
    expect(text).toContain('25 MB of 100 MB, 1 MB a second')
    expect(text).toContain('about 1 minute left')
  })

  it('offers another try only where one can help', async () => {
    const buttons = async (code: string) => (await mountSuspended(ClipUploadItem, { props: { entry: anEntry({ phase: 'stopped', problem: new UploadProblem(409, code) }) } })).findAll('button').map(button => button.text())
    expect(await buttons('network')).toContain('Try again')
    expect(await buttons('upload-not-open')).not.toContain('Try again')
  })
})

describe('a chosen file', () => {
  const file = (view: 'sagittal' | 'frontal-anterior', refusal: 'empty-file' | null = null) => mountSuspended(ClipUploadFile, {
    props: { name: 'stand.mp4', size: 5, refusal, bouts: [], view, side: 'left', boutId: '', recordedAt: '2026-11-27T09:00:00' },
  })

  it('has a near side only when the camera looks from the side', async () => {
    expect((await file('sagittal')).text()).toContain('Side nearest the camera')
    expect((await file('frontal-anterior')).text()).not.toContain('Side nearest the camera')
  })

  it('that cannot be sent asks nothing and says why', async () => {
    const refused = await file('sagittal', 'empty-file')
    expect(refused.findAll('select')).toHaveLength(0)
    expect(refused.get('[role=alert]').text()).toContain('The file is empty')
  })
})
