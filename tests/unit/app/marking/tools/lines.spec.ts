import { describe, expect, it } from 'vitest'
import { EMPTY_DOCUMENT } from '~/marking/document'
import { gesture } from './gesture'

const line = { top: { x: 1150, y: 110 }, bottom: { x: 1152, y: 846 } }
const withLine = { ...EMPTY_DOCUMENT, plumbLine: line }

describe('plumb line tool', () => {
  it('draws from press to release and keeps the upper end as top, whichever way it was drawn', () => {
    const down = gesture('plumb-line').press(1150, 110).move(1151, 500).release(1152, 846)
    expect(down.document.plumbLine).toEqual(line)
    const up = gesture('plumb-line').press(1152, 846).release(1150, 110)
    expect(up.document.plumbLine).toEqual(line)
    expect(up.commands).toHaveLength(1)
  })

  it('takes two clicks for a drag', () => {
    const played = gesture('plumb-line').press(1150, 110).release(1150, 111).move(1151, 500).press(1152, 846).release(1152, 846)
    expect(played.document.plumbLine).toEqual(line)
    expect(played.commands).toHaveLength(1)
  })

  it('refuses a line shorter than a third of the picture and says so', () => {
    const played = gesture('plumb-line').press(1150, 110).release(1150, 400)
    expect(played.document.plumbLine).toBeNull()
    expect(played.notices).toEqual(['plumb-line-too-short'])
  })

  it('drags one end and leaves the other', () => {
    const played = gesture('plumb-line', { document: withLine }).press(1155, 840).move(1165, 850).release(1165, 850)
    expect(played.document.plumbLine).toEqual({ top: line.top, bottom: { x: 1162, y: 856 } })
  })

  it('puts an end back that was dragged too near to the other', () => {
    const played = gesture('plumb-line', { document: withLine }).press(1152, 846).release(1152, 200)
    expect(played.document).toEqual(withLine)
    expect(played.notices).toEqual(['plumb-line-too-short'])
  })

  it('leaves the document unchanged when the gesture is cancelled, at any point of it', () => {
    expect(gesture('plumb-line', { document: withLine }).press(1152, 846).move(900, 900).cancel().document).toEqual(withLine)
    expect(gesture('plumb-line').press(100, 100).move(100, 900).key('Escape').release(100, 900).document).toEqual(EMPTY_DOCUMENT)
    expect(gesture('plumb-line').press(100, 100).release(100, 100).move(100, 900).cancel().document).toEqual(EMPTY_DOCUMENT)
  })

  it('shows the line while it is drawn', () => {
    expect(gesture('plumb-line').press(100, 100).move(101, 300).shown.plumbLine).toEqual({ top: { x: 100, y: 100 }, bottom: { x: 101, y: 300 } })
  })
})

describe('scale tool', () => {
  it('gives a new scale the length that was asked for', () => {
    const played = gesture('scale', { scaleLengthMm: 500 }).press(1053, 447).release(1053, 982)
    expect(played.document.scale).toEqual({ from: { x: 1053, y: 447 }, to: { x: 1053, y: 982 }, lengthMm: 500 })
  })

  it('keeps the length of a scale that is drawn anew or moved', () => {
    const document = { ...EMPTY_DOCUMENT, scale: { from: { x: 100, y: 100 }, to: { x: 100, y: 600 }, lengthMm: 914 } }
    expect(gesture('scale', { document }).press(700, 100).release(700, 300).document.scale?.lengthMm).toBe(914)
    expect(gesture('scale', { document }).press(100, 600).release(110, 640).document.scale).toEqual({ ...document.scale, to: { x: 110, y: 640 } })
  })

  it('refuses two ends in one place', () => {
    const played = gesture('scale').press(100, 100).release(100, 100).press(110, 100).release(110, 100)
    expect(played.document.scale).toBeNull()
    expect(played.notices).toEqual(['scale-too-short'])
  })
})

describe('hand tool', () => {
  it('moves the picture and never the document', () => {
    const played = gesture('pan', { document: withLine, target: 'heel' }).press(1152, 846).move(1100, 800).release(1100, 800)
    expect(played.document).toEqual(withLine)
    expect(played.moves).toEqual([{ x: -52, y: -46 }])
    expect(played.state).toBe('pan.idle')
  })
})
