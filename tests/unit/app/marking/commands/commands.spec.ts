import { describe, expect, it } from 'vitest'
import { applyCommand } from '~/marking/commands/marking-command'
import { moveLandmark } from '~/marking/commands/move-landmark'
import { movePlumbLineEnd } from '~/marking/commands/move-plumb-line-end'
import { moveScaleEnd } from '~/marking/commands/move-scale-end'
import { placeLandmark } from '~/marking/commands/place-landmark'
import { removeLandmark } from '~/marking/commands/remove-landmark'
import { setFacing, setFlag, setSide } from '~/marking/commands/set-circumstance'
import { setNotVisible } from '~/marking/commands/set-not-visible'
import { setPlumbLine } from '~/marking/commands/set-plumb-line'
import { setScale } from '~/marking/commands/set-scale'
import { EMPTY_DOCUMENT } from '~/marking/document'

const placed = applyCommand(EMPTY_DOCUMENT, placeLandmark(EMPTY_DOCUMENT, 'heel', { x: 10, y: 20, sd: 2 }))

describe('placeLandmark', () => {
  it('gives the landmark its point', () => {
    expect(placed.landmarks).toEqual({ heel: { x: 10, y: 20, sd: 2 } })
  })
  it('ends "not visible"', () => {
    const hidden = { ...EMPTY_DOCUMENT, notVisible: { heel: 'clothing' } }
    expect(applyCommand(hidden, placeLandmark(hidden, 'heel', { x: 1, y: 2 }))).toEqual({ ...EMPTY_DOCUMENT, landmarks: { heel: { x: 1, y: 2 } } })
  })
})

describe('moveLandmark', () => {
  it('keeps the sd of the landmark', () => {
    const command = moveLandmark(placed, 'heel', { x: 11, y: 20 })
    expect(command && applyCommand(placed, command).landmarks.heel).toEqual({ x: 11, y: 20, sd: 2 })
  })
  it('is no command when nothing moves or nothing is there', () => {
    expect(moveLandmark(placed, 'heel', { x: 10, y: 20 })).toBeNull()
    expect(moveLandmark(placed, 'tragus', { x: 10, y: 20 })).toBeNull()
  })
})

describe('removeLandmark', () => {
  it('leaves no trace of the landmark', () => {
    const command = removeLandmark(placed, 'heel')
    expect(command && applyCommand(placed, command)).toEqual(EMPTY_DOCUMENT)
  })
  it('is no command without a point', () => {
    expect(removeLandmark(EMPTY_DOCUMENT, 'heel')).toBeNull()
  })
})

describe('setNotVisible', () => {
  it('takes the point away and keeps the reason', () => {
    const command = setNotVisible(placed, 'heel', 'support')
    expect(command && applyCommand(placed, command)).toEqual({ ...EMPTY_DOCUMENT, notVisible: { heel: 'support' } })
  })
  it('is no command when the reason stays the same', () => {
    const hidden = { ...EMPTY_DOCUMENT, notVisible: { heel: 'support' } }
    expect(setNotVisible(hidden, 'heel', 'support')).toBeNull()
    expect(setNotVisible(EMPTY_DOCUMENT, 'heel', null)).toBeNull()
  })
})

describe('plumb line and scale commands', () => {
  const line = { top: { x: 5, y: 0 }, bottom: { x: 6, y: 100 } }
  const scale = { from: { x: 0, y: 0 }, to: { x: 0, y: 50 }, lengthMm: 1000 }
  const both = { ...EMPTY_DOCUMENT, plumbLine: line, scale }

  it('moves one end and leaves the other', () => {
    const end = movePlumbLineEnd(both, 'bottom', { x: 7, y: 90 })
    expect(end && applyCommand(both, end).plumbLine).toEqual({ top: line.top, bottom: { x: 7, y: 90 } })
    const tip = moveScaleEnd(both, 'to', { x: 1, y: 60 })
    expect(tip && applyCommand(both, tip).scale).toEqual({ from: scale.from, to: { x: 1, y: 60 }, lengthMm: 1000 })
  })
  it('is no command for the end of a line that is not there', () => {
    expect(movePlumbLineEnd(EMPTY_DOCUMENT, 'top', { x: 0, y: 0 })).toBeNull()
    expect(moveScaleEnd(EMPTY_DOCUMENT, 'to', { x: 0, y: 0 })).toBeNull()
  })
  it('is no command to take away what is not there', () => {
    expect(setPlumbLine(EMPTY_DOCUMENT, null)).toBeNull()
    expect(setScale(EMPTY_DOCUMENT, null)).toBeNull()
  })
})

describe('circumstance commands', () => {
  it('sets one thing and nothing else', () => {
    const facing = setFacing(EMPTY_DOCUMENT, 'left')
    expect(facing && applyCommand(EMPTY_DOCUMENT, facing)).toEqual({ ...EMPTY_DOCUMENT, facing: 'left' })
    const side = setSide(EMPTY_DOCUMENT, 'right')
    expect(side && applyCommand(EMPTY_DOCUMENT, side)).toEqual({ ...EMPTY_DOCUMENT, side: 'right' })
    const clothed = setFlag(EMPTY_DOCUMENT, 'clothed', true)
    expect(clothed && applyCommand(EMPTY_DOCUMENT, clothed)).toEqual({ ...EMPTY_DOCUMENT, clothed: true })
  })
  it('is no command when it would change nothing', () => {
    expect(setFacing(EMPTY_DOCUMENT, null)).toBeNull()
    expect(setSide(EMPTY_DOCUMENT, null)).toBeNull()
    expect(setFlag(EMPTY_DOCUMENT, 'supported', false)).toBeNull()
  })
})
