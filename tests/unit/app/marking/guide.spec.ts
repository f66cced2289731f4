import { describe, expect, it } from 'vitest'
import { guidedLandmarks } from '#shared/geometry/landmarks'
import { EMPTY_DOCUMENT } from '~/marking/document'
import { completedBy, guideOrder, guideProgress, landmarkAfter, nextLandmark, nextOpenSet } from '~/marking/guide'

const CORE = { upTo: 'core', skipped: [] } as const
const MORE = { upTo: 'more', skipped: [] } as const

function marking(...names: readonly string[]) {
  return { ...EMPTY_DOCUMENT, landmarks: Object.fromEntries(names.map((name, index) => [name, { x: 10 * index, y: 10 }])) }
}

describe('guideOrder', () => {
  it('begins with the core set of the view', () => {
    expect(guideOrder('sagittal').core.map(landmark => landmark.id)).toEqual(['acromion', 'greaterTrochanter', 'lateralEpicondyle', 'lateralMalleolus', 'fifthMetatarsal'])
    expect(guideOrder('frontal-anterior').core.map(landmark => landmark.id).sort()).toEqual(['acromionLeft', 'acromionRight', 'ankleCentreLeft', 'ankleCentreRight', 'asisLeft', 'asisRight', 'sternalNotch'])
  })
  it('asks for posterior spines from behind and anterior ones from the front', () => {
    expect(guideOrder('frontal-posterior').core.map(landmark => landmark.id)).toContain('psisLeft')
    expect(guideOrder('frontal-posterior').core.map(landmark => landmark.id)).not.toContain('asisLeft')
  })
  it('leaves nothing out that the view offers, so that every mark can be listed and edited', () => {
    const { core, more, equipment, unasked } = guideOrder('sagittal')
    expect([...core, ...more, ...equipment, ...unasked].map(landmark => landmark.id).sort())
      .toEqual(guidedLandmarks('sagittal').map(landmark => landmark.id).sort())
    expect(unasked.map(landmark => landmark.id)).toEqual(['wrist'])
  })
  it('asks beyond the core only what some measure needs', () => {
    for (const view of ['sagittal', 'frontal-anterior', 'frontal-posterior'] as const) {
      const { core, more, equipment } = guideOrder(view)
      const all = [...core, ...more, ...equipment].map(landmark => landmark.id)
      expect(new Set(all).size).toBe(all.length)
      for (const landmark of [...more, ...equipment]) {
        const others = marking(...all.filter(id => id !== landmark.id))
        const scaled = { ...others, scale: { from: { x: 0, y: 0 }, to: { x: 0, y: 100 }, lengthMm: 1000 } }
        expect(completedBy(scaled, view, landmark.id), landmark.id).not.toEqual([])
      }
    }
  })
})

describe('nextLandmark', () => {
  const order = guideOrder('sagittal')

  it('goes through the core set in order and then ends', () => {
    expect(nextLandmark(EMPTY_DOCUMENT, order, CORE)?.id).toBe('acromion')
    expect(nextLandmark(marking('acromion'), order, CORE)?.id).toBe('greaterTrochanter')
    expect(nextLandmark(marking(...order.core.map(landmark => landmark.id)), order, CORE)).toBeNull()
  })
  it('goes on with the rest of the body when that is asked for', () => {
    expect(nextLandmark(marking(...order.core.map(landmark => landmark.id)), order, MORE)?.id).toBe('heel')
  })
  it('takes a landmark that is not visible as dealt with', () => {
    expect(nextLandmark({ ...EMPTY_DOCUMENT, notVisible: { acromion: 'clothing' } }, order, CORE)?.id).toBe('greaterTrochanter')
  })
  it('comes back to a skipped landmark when nothing else is left', () => {
    const place = { upTo: 'core', skipped: ['acromion'] } as const
    expect(nextLandmark(EMPTY_DOCUMENT, order, place)?.id).toBe('greaterTrochanter')
    expect(nextLandmark(marking('greaterTrochanter', 'lateralEpicondyle', 'lateralMalleolus', 'fifthMetatarsal'), order, place)?.id).toBe('acromion')
  })
  it('names the one that follows', () => {
    expect(landmarkAfter(EMPTY_DOCUMENT, order, CORE, 'acromion')?.id).toBe('greaterTrochanter')
    expect(landmarkAfter(marking('acromion', 'greaterTrochanter', 'lateralEpicondyle', 'lateralMalleolus'), order, CORE, 'fifthMetatarsal')).toBeNull()
  })
})

describe('nextOpenSet', () => {
  const order = guideOrder('sagittal')
  it('names the next set in which something is left', () => {
    expect(nextOpenSet(EMPTY_DOCUMENT, order, 'core')).toBe('more')
    expect(nextOpenSet(marking(...order.more.map(landmark => landmark.id)), order, 'core')).toBe('equipment')
    expect(nextOpenSet(EMPTY_DOCUMENT, order, 'equipment')).toBeNull()
  })
})

describe('guideProgress', () => {
  it('counts what is asked for now', () => {
    const order = guideOrder('sagittal')
    const document = { ...marking('acromion', 'heel'), notVisible: { greaterTrochanter: 'support' } }
    expect(guideProgress(document, order, CORE)).toEqual({ marked: 1, notVisible: 1, total: 5, position: 3, isCoreDone: false })
    expect(guideProgress(document, order, MORE)).toMatchObject({ marked: 2, total: 5 + order.more.length })
  })
})

describe('completedBy', () => {
  it('names the readings that one more landmark brings', () => {
    expect(completedBy(marking('greaterTrochanter'), 'sagittal', 'acromion')).toContain('trunkInclination')
    expect(completedBy(marking('greaterTrochanter'), 'sagittal', 'lateralMalleolus')).not.toContain('kneeFlexion')
    expect(completedBy(marking('greaterTrochanter', 'lateralEpicondyle'), 'sagittal', 'lateralMalleolus')).toContain('kneeFlexion')
  })
  it('promises nothing that support withholds', () => {
    const legs = marking('acromion', 'greaterTrochanter', 'lateralEpicondyle', 'lateralMalleolus', 'heel')
    expect(completedBy(legs, 'sagittal', 'fifthMetatarsal')).toContain('centreOfMassOffset')
    expect(completedBy({ ...legs, supported: true }, 'sagittal', 'fifthMetatarsal')).not.toContain('centreOfMassOffset')
  })
})
