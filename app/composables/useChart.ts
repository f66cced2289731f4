import type { ComputedRef, InjectionKey } from 'vue'
import type { Chart } from '#shared/schemas/patient'

interface ChartContext { chart: ComputedRef<Chart>, refresh: () => Promise<void> }

const CHART: InjectionKey<ChartContext> = Symbol('chart')

/** Given by the page of a patient to the tabs inside it. */
export function provideChart(context: ChartContext) {
  provide(CHART, context)
}

/** The chart that the tab lies in. @throws outside of a patient's page. */
export function useChart(): ChartContext {
  const context = inject(CHART, null)
  if (!context) throw new Error('useChart is for the tabs of a patient')
  return context
}
