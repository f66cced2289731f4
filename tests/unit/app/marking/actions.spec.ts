import { describe, expect, it } from 'vitest'
import { actionForKey, createBenchActions } from '~/marking/actions'
import type { BenchControl, BenchSituation } from '~/marking/actions'
import { matchesShortcut } from '~/marking/shortcut'
import type { KeyPress } from '~/marking/shortcut'

function press(key: string, modifiers: Partial<Omit<KeyPress, 'key'>> = {}): KeyPress {
  return { key, shift: false, alt: false, ctrl: false, meta: false, ...modifiers }
}

const SITUATION: BenchSituation = {
  canUndo: true, canRedo: true, frame: 5, frameCount: 100, isMarking: true, isMarkSelected: true, hasTarget: true, isZoomed: true, isDirty: true, canFinish: true, isBusy: false,
}

function recorder() {
  const calls: string[] = []
  const note = (name: string) => (...values: readonly (number | string)[]) => { calls.push([name, ...values].join(' ')) }
  const control: BenchControl = {
    undo: note('undo'), redo: note('redo'), stepFrames: note('step'), goToFrame: note('go'), togglePlay: note('play'), markFrame: note('mark'),
    zoom: note('zoom'), fit: note('fit'), chooseTool: note('tool'), nudge: note('nudge'), removeMark: note('remove'),
    askNotVisible: note('not-visible'), skip: note('skip'), letGo: note('let-go'), save: note('save'),
  }
  return { calls, actions: createBenchActions(control) }
}

describe('actionForKey', () => {
  it('nudges the selected landmark while the focus is on the marks, by 1, 10 and 0.1 px', () => {
    const { actions, calls } = recorder()
    actionForKey(actions, press('ArrowRight'), true, SITUATION)?.run()
    actionForKey(actions, press('ArrowUp', { shift: true }), true, SITUATION)?.run()
    actionForKey(actions, press('ArrowLeft', { alt: true }), true, SITUATION)?.run()
    expect(calls).toEqual(['nudge 1 0', 'nudge 0 -10', 'nudge -0.1 0'])
  })

  it('steps frames with the same arrows when nothing is selected or the focus is elsewhere', () => {
    const { actions, calls } = recorder()
    actionForKey(actions, press('ArrowRight'), true, { ...SITUATION, isMarkSelected: false })?.run()
    actionForKey(actions, press('ArrowLeft'), false, SITUATION)?.run()
    actionForKey(actions, press('ArrowRight', { shift: true }), false, SITUATION)?.run()
    expect(calls).toEqual(['step 1', 'step -1', 'step 10'])
  })

  it('answers single letters on the marks alone', () => {
    const { actions } = recorder()
    expect(actionForKey(actions, press('p'), false, SITUATION)).toBeNull()
    expect(actionForKey(actions, press('p'), true, SITUATION)?.id).toBe('plumb-line')
  })

  it('runs no action that is not enabled', () => {
    const { actions } = recorder()
    expect(actionForKey(actions, press('z', { ctrl: true }), false, { ...SITUATION, canUndo: false })).toBeNull()
    expect(actionForKey(actions, press('ArrowLeft'), false, { ...SITUATION, frame: 0 })).toBeNull()
    expect(actionForKey(actions, press('ArrowRight'), false, { ...SITUATION, frame: 99 })).toBeNull()
  })

  it('undoes with Ctrl or Command and redoes with both usual keys', () => {
    const { actions } = recorder()
    expect(actionForKey(actions, press('z', { ctrl: true }), false, SITUATION)?.id).toBe('undo')
    expect(actionForKey(actions, press('z', { meta: true }), false, SITUATION)?.id).toBe('undo')
    expect(actionForKey(actions, press('Z', { ctrl: true, shift: true }), false, SITUATION)?.id).toBe('redo')
    expect(actionForKey(actions, press('y', { ctrl: true }), false, SITUATION)?.id).toBe('redo')
  })
})

describe('createBenchActions', () => {
  it('gives every action its own id and no shortcut twice in a scope', () => {
    const { actions } = recorder()
    expect(new Set(actions.map(action => action.id)).size).toBe(actions.length)
    const shortcuts = actions.flatMap(action => action.shortcuts.map(shortcut => `${action.scope} ${shortcut}`))
    expect(new Set(shortcuts).size).toBe(shortcuts.length)
  })
  it('uses single characters on the marks alone, where no screen reader or typing is disturbed', () => {
    const { actions } = recorder()
    const everywhere = actions.filter(action => action.scope === 'bench').flatMap(action => action.shortcuts)
    expect(everywhere.filter(shortcut => shortcut.length === 1)).toEqual([])
  })
})

describe('matchesShortcut', () => {
  it('wants exactly the modifiers named', () => {
    expect(matchesShortcut(press('ArrowLeft', { shift: true }), 'ArrowLeft')).toBe(false)
    expect(matchesShortcut(press('s', { ctrl: true, alt: true }), 'Mod+S')).toBe(false)
    expect(matchesShortcut(press(' '), 'Space')).toBe(true)
  })
  it('takes a sign with or without Shift, as keyboards differ', () => {
    expect(matchesShortcut(press('+', { shift: true }), 'Plus')).toBe(true)
    expect(matchesShortcut(press('+'), 'Plus')).toBe(true)
  })
})
