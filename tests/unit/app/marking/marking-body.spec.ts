import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { MarkingInputSchema } from '#shared/schemas/marking'
import { EMPTY_DOCUMENT } from '~/marking/document'
import { fromMarkingFields, inheritSetting, toMarkingFields, toMeasurable } from '~/marking/marking-body'
import { documents } from './arbitrary-document'

describe('toMarkingFields', () => {
  it('makes a body that the interface takes, and back again, for any sagittal document', () => {
    fc.assert(fc.property(documents, (document) => {
      const body = MarkingInputSchema.parse({ ...toMarkingFields(document, 'sagittal'), status: 'draft' })
      expect(fromMarkingFields(body)).toEqual(document)
    }))
  })
  it('leaves facing and near side out of a frontal body', () => {
    const document = { ...EMPTY_DOCUMENT, facing: 'left', side: 'right' } as const
    expect(toMarkingFields(document, 'frontal-anterior')).toEqual({ landmarks: {} })
  })
})

describe('toMeasurable', () => {
  it('adds the view and the picture', () => {
    expect(toMeasurable(EMPTY_DOCUMENT, 'sagittal', { width: 10, height: 20 })).toEqual({ landmarks: {}, view: 'sagittal', width: 10, height: 20 })
  })
})

describe('inheritSetting', () => {
  it('carries everything to the next still but the landmarks', () => {
    fc.assert(fc.property(documents, (document) => {
      expect(inheritSetting(document)).toEqual({ ...document, landmarks: {}, notVisible: {} })
    }))
  })
})
