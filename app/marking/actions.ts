import { matchesShortcut } from './shortcut'
import type { KeyPress } from './shortcut'
import type { ToolId } from './tools/tool'

/** What an action needs to know to say whether it can run. */
export interface BenchSituation {
  readonly canUndo: boolean
  readonly canRedo: boolean
  /** Frame in sight, 0-based, and how many there are. */
  readonly frame: number
  readonly frameCount: number
  /** Whether the frame in sight is a still that is being marked. */
  readonly isMarking: boolean
  /** Whether the selected landmark has a point that can be moved. */
  readonly isMarkSelected: boolean
  /** Whether a landmark is next, so that it can be passed over or said to be not visible. */
  readonly hasTarget: boolean
  readonly isZoomed: boolean
  /** Whether there are changes that the server does not have. */
  readonly isDirty: boolean
  /** Whether there is something to finish: changes, or a version that was saved as a draft. */
  readonly canFinish: boolean
  readonly isBusy: boolean
}

/** What the bench can do; the actions call nothing else. */
export interface BenchControl {
  readonly undo: () => void
  readonly redo: () => void
  readonly stepFrames: (count: number) => void
  readonly goToFrame: (frame: number) => void
  readonly togglePlay: () => void
  readonly markFrame: () => void
  readonly zoom: (factor: number) => void
  readonly fit: () => void
  readonly chooseTool: (tool: ToolId) => void
  readonly nudge: (dx: number, dy: number) => void
  readonly removeMark: () => void
  readonly askNotVisible: () => void
  readonly skip: () => void
  readonly letGo: () => void
  readonly save: (status: 'draft' | 'final') => void
}

/**
 * One act of the bench, shared by buttons, keys and menus. `label` is a message key.
 * Scope `marks` answers only while the focus is on the still or its marks (so that single letters
 * disturb no screen reader and arrows can both step frames and nudge); scope `bench` answers everywhere.
 */
export interface BenchAction {
  readonly id: string
  readonly label: string
  readonly shortcuts: readonly string[]
  readonly scope: 'bench' | 'marks'
  readonly isEnabled: (situation: BenchSituation) => boolean
  readonly run: () => void
}

type Describe = Pick<BenchAction, 'id' | 'run'> & Partial<Pick<BenchAction, 'shortcuts' | 'scope' | 'isEnabled'>>

function action({ id, run, shortcuts = [], scope = 'bench', isEnabled = () => true }: Describe): BenchAction {
  return { id, label: `marking.action.${id}`, shortcuts, scope, isEnabled, run }
}

const NUDGES = [
  { modifier: '', name: 'step', px: 1 },
  { modifier: 'Shift+', name: 'far', px: 10 },
  { modifier: 'Alt+', name: 'fine', px: 0.1 },
] as const

const DIRECTIONS = [
  { key: 'ArrowLeft', name: 'left', x: -1, y: 0 },
  { key: 'ArrowRight', name: 'right', x: 1, y: 0 },
  { key: 'ArrowUp', name: 'up', x: 0, y: -1 },
  { key: 'ArrowDown', name: 'down', x: 0, y: 1 },
] as const

function nudgeActions(control: BenchControl): readonly BenchAction[] {
  return NUDGES.flatMap(({ modifier, name, px }) => DIRECTIONS.map(direction => action({
    id: `nudge-${name}-${direction.name}`,
    shortcuts: [`${modifier}${direction.key}`],
    scope: 'marks',
    isEnabled: situation => situation.isMarking && situation.isMarkSelected,
    run: () => control.nudge(direction.x * px, direction.y * px),
  })))
}

function frameActions(control: BenchControl): readonly BenchAction[] {
  const hasNext = (situation: BenchSituation) => situation.frame < situation.frameCount - 1
  const hasPrevious = (situation: BenchSituation) => situation.frame > 0
  return [
    action({ id: 'next-frame', shortcuts: ['ArrowRight'], isEnabled: hasNext, run: () => control.stepFrames(1) }),
    action({ id: 'previous-frame', shortcuts: ['ArrowLeft'], isEnabled: hasPrevious, run: () => control.stepFrames(-1) }),
    action({ id: 'ten-forward', shortcuts: ['Shift+ArrowRight', 'PageDown'], isEnabled: hasNext, run: () => control.stepFrames(10) }),
    action({ id: 'ten-back', shortcuts: ['Shift+ArrowLeft', 'PageUp'], isEnabled: hasPrevious, run: () => control.stepFrames(-10) }),
    action({ id: 'first-frame', shortcuts: ['Home'], isEnabled: hasPrevious, run: () => control.goToFrame(0) }),
    action({ id: 'last-frame', shortcuts: ['End'], isEnabled: hasNext, run: () => control.goToFrame(Number.MAX_SAFE_INTEGER) }),
    action({ id: 'play', shortcuts: ['Space'], isEnabled: situation => situation.frameCount > 1, run: control.togglePlay }),
  ]
}

function viewActions(control: BenchControl): readonly BenchAction[] {
  return [
    action({ id: 'zoom-in', shortcuts: ['Plus', '='], scope: 'marks', run: () => control.zoom(1.5) }),
    action({ id: 'zoom-out', shortcuts: ['-'], scope: 'marks', isEnabled: situation => situation.isZoomed, run: () => control.zoom(1 / 1.5) }),
    action({ id: 'fit', shortcuts: ['0'], scope: 'marks', isEnabled: situation => situation.isZoomed, run: control.fit }),
    action({ id: 'hand', shortcuts: ['h'], scope: 'marks', run: () => control.chooseTool('pan') }),
  ]
}

function markActions(control: BenchControl): readonly BenchAction[] {
  const isMarking = (situation: BenchSituation) => situation.isMarking
  return [
    action({ id: 'undo', shortcuts: ['Mod+Z'], isEnabled: situation => situation.isMarking && situation.canUndo, run: control.undo }),
    action({ id: 'redo', shortcuts: ['Mod+Shift+Z', 'Mod+Y'], isEnabled: situation => situation.isMarking && situation.canRedo, run: control.redo }),
    action({ id: 'mark-frame', shortcuts: ['m'], scope: 'marks', isEnabled: situation => !situation.isMarking && !situation.isBusy, run: control.markFrame }),
    action({ id: 'landmarks', shortcuts: ['l'], scope: 'marks', isEnabled: isMarking, run: () => control.chooseTool('landmark') }),
    action({ id: 'plumb-line', shortcuts: ['p'], scope: 'marks', isEnabled: isMarking, run: () => control.chooseTool('plumb-line') }),
    action({ id: 'scale', shortcuts: ['s'], scope: 'marks', isEnabled: isMarking, run: () => control.chooseTool('scale') }),
    action({ id: 'not-visible', shortcuts: ['n'], scope: 'marks', isEnabled: situation => situation.isMarking && situation.hasTarget, run: control.askNotVisible }),
    action({ id: 'skip', shortcuts: ['k'], scope: 'marks', isEnabled: situation => situation.isMarking && situation.hasTarget, run: control.skip }),
    action({ id: 'remove', shortcuts: ['Delete', 'Backspace'], scope: 'marks', isEnabled: situation => situation.isMarking && situation.isMarkSelected, run: control.removeMark }),
    action({ id: 'let-go', shortcuts: ['Escape'], run: control.letGo }),
    action({ id: 'save', shortcuts: ['Mod+S'], isEnabled: situation => situation.canFinish && !situation.isBusy, run: () => control.save('final') }),
    action({ id: 'save-draft', isEnabled: situation => situation.isMarking && situation.isDirty && !situation.isBusy, run: () => control.save('draft') }),
  ]
}

/** All acts of the bench in the order in which the keyboard help lists them. */
export function createBenchActions(control: BenchControl): readonly BenchAction[] {
  return [...nudgeActions(control), ...frameActions(control), ...markActions(control), ...viewActions(control)]
}

/**
 * @param isOnMarks whether the focus is on the still or its marks.
 * @returns the enabled act that the key asks for, those of the marks before those of the bench; `null` when there is none.
 */
export function actionForKey(actions: readonly BenchAction[], press: KeyPress, isOnMarks: boolean, situation: BenchSituation): BenchAction | null {
  const answers = (scope: BenchAction['scope']) => actions.find(candidate =>
    candidate.scope === scope
    && candidate.shortcuts.some(shortcut => matchesShortcut(press, shortcut))
    && candidate.isEnabled(situation))
  return (isOnMarks ? answers('marks') : undefined) ?? answers('bench') ?? null
}
