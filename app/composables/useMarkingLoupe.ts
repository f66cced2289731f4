import type { MarkingCommand } from '~/marking/commands/marking-command'
import type { MarkingBench } from './useMarkingBench'

interface Place { readonly x: number, readonly y: number }

/** The end that a gesture holds, where the command tells. */
function heldPlace(command: MarkingCommand | null): Place | null {
  if (command?.type === 'landmark.place') return command.point
  const isMove = command?.type === 'landmark.move' || command?.type === 'plumb-line.move-end' || command?.type === 'scale.move-end'
  return isMove ? command.to : null
}

/**
 * Where the loupe looks, in picture pixels: at what is being placed or nudged, else under the pointer while there is
 * something to place; `null` when there is nothing to look at.
 */
export function useMarkingLoupe(bench: MarkingBench, hover: Ref<Place | null>) {
  const { tools, guide, view, picture, marking, preview } = bench
  const isAiming = computed(() => tools.toolId.value === 'landmark'
    ? tools.isGesture.value || guide.next.value !== null
    : tools.toolId.value !== 'pan')

  return computed<Place | null>(() => {
    const held = heldPlace(preview.value)
    if (held || !marking.value || !hover.value || !isAiming.value) return held
    const at = view.toImage(hover.value.x, hover.value.y)
    const isInside = at !== null && at.x >= 0 && at.y >= 0 && at.x <= picture.width && at.y <= picture.height
    return isInside ? at : null
  })
}
