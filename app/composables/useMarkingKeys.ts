import { actionForKey } from '~/marking/actions'
import type { MarkingBench } from './useMarkingBench'

/** Whether a key belongs to the control that has the focus, and so is none of the bench's. */
function belongsToControl(event: KeyboardEvent): boolean {
  const { target } = event
  if (!(target instanceof Element)) return false
  if (target.closest('dialog[open]')) return true
  if (target.closest('input, select, textarea, [contenteditable]')) return !(event.ctrlKey || event.metaKey) || event.key.toLowerCase() !== 's'
  const isPressKey = event.key === ' ' || event.key === 'Enter'
  if (isPressKey) return target.closest('button, a, summary, [role=button], [role=tab]') !== null
  return event.key.startsWith('Arrow') && target.closest('[role=tab], [role=radio], [role=menu]') !== null
}

/** The keys of the bench. Arrows nudge while the focus is on the still or its marks, and step through the clip elsewhere. */
export function useMarkingKeys(bench: MarkingBench) {
  useEventListener('keydown', (event: KeyboardEvent) => {
    if (event.defaultPrevented || event.isComposing || belongsToControl(event)) return
    const isOnMarks = event.target instanceof Element && event.target.closest('[data-marks]') !== null
    const press = { key: event.key, shift: event.shiftKey, alt: event.altKey, ctrl: event.ctrlKey, meta: event.metaKey }
    const action = actionForKey(bench.actions, press, isOnMarks, bench.situation.value)
    if (!action) return
    event.preventDefault()
    action.run()
  })
  useEventListener('keyup', (event: KeyboardEvent) => {
    if (event.key.startsWith('Arrow')) bench.nudging.settle()
  })
  // The browser window went away with a key or a button still down.
  useEventListener('blur', () => {
    bench.nudging.settle()
    bench.tools.cancel()
  })
}
