import { GeometryError, type GeometryErrorCode } from '#shared/geometry/geometry-error'
import type { View } from '#shared/geometry/landmarks'
import { measureMarking, type MeasuredMarking } from '#shared/geometry/measure-marking'
import { drawnLines } from '~/marking/drawn-lines'
import type { MarkingDocument } from '~/marking/document'
import { toMeasurable } from '~/marking/marking-body'
import type { Size } from '~/marking/viewport'

export interface MeasuringFault { readonly code: GeometryErrorCode, readonly path: readonly string[] }

interface Measuring { readonly measured: MeasuredMarking | null, readonly fault: MeasuringFault | null }

/** The same core that the server uses; what it refuses is a fault to show, anything else is an error. */
function measure(document: MarkingDocument, view: View, picture: Size): Measuring {
  try {
    return { measured: measureMarking(toMeasurable(document, view, picture)), fault: null }
  } catch (error) {
    if (!(error instanceof GeometryError)) throw error
    return { measured: null, fault: { code: error.code, path: error.path } }
  }
}

/**
 * Readings of the marking as it is drawn, live while something is dragged. Where the preview alone cannot be measured
 * (a plumb line that is still too short) those of the document stay.
 */
export function useMarkingReadings(view: View, picture: Size, document: Ref<MarkingDocument | null>, shown: Ref<MarkingDocument | null>) {
  const settled = computed(() => document.value && measure(document.value, view, picture))
  const live = computed(() => {
    if (!shown.value || shown.value === document.value) return settled.value
    const now = measure(shown.value, view, picture)
    return now.measured ? now : settled.value
  })
  const readings = computed(() => live.value?.measured?.readings ?? [])
  return {
    readings,
    withheld: computed(() => live.value?.measured?.withheld ?? []),
    warnings: computed(() => live.value?.measured?.warnings ?? []),
    roll: computed(() => live.value?.measured?.roll ?? null),
    scale: computed(() => live.value?.measured?.scale ?? null),
    fault: computed(() => live.value?.fault ?? null),
    /** Readings without the gesture that is going on: for what is said and for what is compared. */
    settledReadings: computed(() => settled.value?.measured?.readings ?? []),
    lines: computed(() => shown.value ? drawnLines(toMeasurable(shown.value, view, picture), readings.value) : []),
  }
}
