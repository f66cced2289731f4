import { landmarkIdle } from './landmark/idle'
import { lineIdle } from './line/idle'
import { panIdle } from './pan/idle'
import { PLUMB_LINE_KIND } from './plumb-line/plumb-line-kind'
import { SCALE_KIND } from './scale/scale-kind'
import type { ToolId, ToolState } from './tool'

const STARTS: Readonly<Record<ToolId, () => ToolState>> = {
  'landmark': landmarkIdle,
  'plumb-line': () => lineIdle(PLUMB_LINE_KIND),
  'scale': () => lineIdle(SCALE_KIND),
  'pan': panIdle,
}

/** @returns the state in which a tool waits for its first event. */
export function startTool(id: ToolId): ToolState {
  return STARTS[id]()
}
