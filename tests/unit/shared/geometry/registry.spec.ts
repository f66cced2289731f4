import { describe, expect, it } from 'vitest'
import landmarkTexts from '../../../../app/i18n/locales/en/landmarks.json'
import measureTexts from '../../../../app/i18n/locales/en/measures.json'
import { findLandmark, guidedLandmarks, LANDMARKS } from '#shared/geometry/landmarks'
import { measureKeys } from '#shared/geometry/measure-definition'
import { findMeasure, MEASURES, measuresOf } from '#shared/geometry/registry'

function textAt(root: unknown, key: string): unknown {
  return key.split('.').reduce<unknown>((node, part) => (typeof node === 'object' && node !== null ? Reflect.get(node, part) : undefined), root)
}

describe('landmarks', () => {
  it('have one id each', () => {
    expect(new Set(LANDMARKS.map(landmark => landmark.id)).size).toBe(LANDMARKS.length)
  })

  it.each(LANDMARKS.map(landmark => [landmark.id, landmark] as const))('%s has a name and a hint to show', (_, landmark) => {
    expect(textAt(landmarkTexts, landmark.nameKey)).toEqual(expect.any(String))
    expect(textAt(landmarkTexts, landmark.hintKey)).toEqual(expect.any(String))
  })

  it('of the core set come first in the guide', () => {
    expect(guidedLandmarks('sagittal').slice(0, 5).map(landmark => landmark.id))
      .toEqual(['acromion', 'greaterTrochanter', 'lateralEpicondyle', 'lateralMalleolus', 'fifthMetatarsal'])
    expect(guidedLandmarks('frontal-anterior').filter(landmark => landmark.core).map(landmark => landmark.id))
      .toEqual(['acromionLeft', 'acromionRight', 'asisLeft', 'asisRight', 'ankleCentreLeft', 'ankleCentreRight', 'sternalNotch'])
    for (const view of ['sagittal', 'frontal-anterior', 'frontal-posterior'] as const) {
      const core = guidedLandmarks(view).map(landmark => landmark.core)
      expect(core, view).toEqual([...core].sort((a, b) => Number(b) - Number(a)))
    }
  })
})

describe('registry', () => {
  it('has one id each and finds it', () => {
    expect(new Set(MEASURES.map(measure => measure.id)).size).toBe(MEASURES.length)
    for (const measure of MEASURES) expect(findMeasure(measure.id)).toBe(measure)
    expect(findMeasure('constructor')).toBeNull()
  })

  it.each(MEASURES.map(measure => [measure.id, measure] as const))('%s has its texts, a source, a change floor in each of its units', (id, measure) => {
    for (const key of Object.values(measureKeys(id))) expect(textAt(measureTexts, key), key).toEqual(expect.any(String))
    for (const caution of measure.cautions) expect(textAt(measureTexts, `measure.cautions.${caution}`), caution).toEqual(expect.any(String))
    expect(measure.source.length).toBeGreaterThan(20)
    for (const { unit } of measure.recipes) expect(measure.changeFloor[unit], unit).toBeGreaterThan(0)
  })

  it.each(MEASURES.map(measure => [measure.id, measure] as const))('%s asks only for landmarks of its views and draws between them', (_, measure) => {
    for (const recipe of measure.recipes) {
      for (const id of recipe.landmarks) {
        for (const view of recipe.views) expect(findLandmark(id)?.views, id).toContain(view)
      }
      const drawn = recipe.lines.flatMap(line => [...line.from, ...line.to])
      expect(recipe.landmarks).toEqual(expect.arrayContaining([...new Set([...drawn, ...recipe.shownAt])]))
      expect(recipe.side !== undefined).toBe(measure.sided)
    }
  })

  it('lists every measure in at least one view', () => {
    const listed = new Set((['sagittal', 'frontal-anterior', 'frontal-posterior'] as const).flatMap(view => measuresOf(view).map(measure => measure.id)))
    expect(listed.size).toBe(MEASURES.length)
  })
})
