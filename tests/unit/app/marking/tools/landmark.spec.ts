import { describe, expect, it } from 'vitest'
import { EMPTY_DOCUMENT } from '~/marking/document'
import { gesture } from './gesture'

const marked = { ...EMPTY_DOCUMENT, landmarks: { acromion: { x: 500, y: 260 }, heel: { x: 520, y: 262 } } }

describe('landmark tool', () => {
  it('places the target where the pointer is let go, by one command', () => {
    const played = gesture('landmark', { target: 'acromion' }).press(100, 100).move(140, 120).move(150, 130).release(150, 130)
    expect(played.document.landmarks).toEqual({ acromion: { x: 150, y: 130 } })
    expect(played.commands).toHaveLength(1)
    expect(played.preview).toBeNull()
    expect(played.selected).toBe('acromion')
  })

  it('shows the target under the pointer while it is held, without changing the document', () => {
    const played = gesture('landmark', { target: 'acromion' }).press(100, 100).move(140, 120)
    expect(played.shown.landmarks).toEqual({ acromion: { x: 140, y: 120 } })
    expect(played.document).toEqual(EMPTY_DOCUMENT)
  })

  it('leaves the document unchanged when the gesture is cancelled', () => {
    const played = gesture('landmark', { target: 'acromion' }).press(10, 10).move(50, 10).cancel()
    expect(played.document).toEqual(EMPTY_DOCUMENT)
    expect(played.preview).toBeNull()
    expect(played.state).toBe('landmark.idle')
  })

  it('leaves the document unchanged on Escape', () => {
    const played = gesture('landmark', { document: marked }).press(500, 260).move(600, 300).key('Escape').release(600, 300)
    expect(played.document).toEqual(marked)
    expect(played.commands).toEqual([])
  })

  it('drags a landmark by where it was taken, so that it does not jump', () => {
    const played = gesture('landmark', { document: marked }).press(495, 258).move(505, 268).release(505, 268)
    expect(played.document.landmarks.acromion).toEqual({ x: 510, y: 270 })
    expect(played.commands).toHaveLength(1)
  })

  it('takes the nearest of two landmarks within reach', () => {
    expect(gesture('landmark', { document: marked, reach: 30 }).press(515, 262).selected).toBe('heel')
    expect(gesture('landmark', { document: marked, reach: 30 }).press(504, 261).selected).toBe('acromion')
  })

  it('takes a landmark rather than placing the target on it', () => {
    const played = gesture('landmark', { document: marked, target: 'tragus' }).press(500, 260).release(500, 260)
    expect(played.document).toEqual(marked)
    expect(played.selected).toBe('acromion')
  })

  it('places the target close beside a marked landmark, however wide the reach of a finger', () => {
    const played = gesture('landmark', { document: marked, target: 'canthus', reach: 40 }).press(500, 253).release(500, 253)
    expect(played.document.landmarks).toEqual({ ...marked.landmarks, canthus: { x: 500, y: 253 } })
  })

  it('takes a landmark that was gone to by name in the whole reach, even while another is to be placed', () => {
    const played = gesture('landmark', { document: marked, target: 'canthus', chosen: 'acromion', reach: 40 }).press(480, 253).release(481, 253)
    expect(played.document.landmarks.acromion).toEqual({ x: 501, y: 260 })
  })

  it('only selects on a press without a move', () => {
    const played = gesture('landmark', { document: marked }).press(503, 260).release(503, 260)
    expect(played.commands).toEqual([])
    expect(played.selected).toBe('acromion')
  })

  it('keeps landmarks inside the picture', () => {
    const placed = gesture('landmark', { target: 'heel' }).press(1400, 1000).move(1600, -5).release(1600, -5)
    expect(placed.document.landmarks.heel).toEqual({ x: 1440, y: 0 })
    const dragged = gesture('landmark', { document: marked }).press(500, 260).release(-40, 2000)
    expect(dragged.document.landmarks.acromion).toEqual({ x: 0, y: 1080 })
  })

  it('places anew a target that is marked already', () => {
    const played = gesture('landmark', { document: marked, target: 'acromion' }).press(900, 600).release(900, 600)
    expect(played.commands.map(command => command.type)).toEqual(['landmark.move'])
    expect(played.document.landmarks.acromion).toEqual({ x: 900, y: 600 })
  })

  it('moves the picture when there is nothing to take and nothing to place', () => {
    const played = gesture('landmark', { document: marked }).press(900, 600).move(910, 590).release(910, 590)
    expect(played.document).toEqual(marked)
    expect(played.moves).toEqual([{ x: 10, y: -10 }])
    expect(played.state).toBe('landmark.idle')
  })
})
