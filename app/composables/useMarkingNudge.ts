import { imagePoint } from '#shared/geometry/point'
import { moveLandmark } from '~/marking/commands/move-landmark'
import type { MarkingCommand } from '~/marking/commands/marking-command'
import type { MarkingDocument } from '~/marking/document'
import { clampToPicture } from '~/marking/viewport'
import type { Size } from '~/marking/viewport'

export interface MarkingNudgeOptions {
  readonly picture: Size
  readonly document: Ref<MarkingDocument | null>
  readonly preview: Ref<MarkingCommand | null>
  readonly run: (command: MarkingCommand) => void
}

/** Arrow keys move a landmark. While a key is held it is one gesture: one command when it is let go. */
export function useMarkingNudge({ picture, document, preview, run }: MarkingNudgeOptions) {
  const isNudging = ref(false)

  function nudge(landmark: string, dx: number, dy: number) {
    const held = preview.value?.type === 'landmark.move' && preview.value.landmark === landmark ? preview.value.to : undefined
    const from = held ?? document.value?.landmarks[landmark]
    if (!document.value || !from) return
    // Tenths of a pixel stay tenths: 0.1 has no exact double.
    const round = (value: number) => Math.round(value * 1000) / 1000
    const to = clampToPicture(picture, imagePoint(round(from.x + dx), round(from.y + dy)))
    preview.value = moveLandmark(document.value, landmark, to)
    isNudging.value = true
  }

  /** The key was let go. */
  function settle() {
    if (!isNudging.value) return
    isNudging.value = false
    const command = preview.value
    preview.value = null
    if (command) run(command)
  }

  return { nudge, settle, isNudging: readonly(isNudging) }
}
