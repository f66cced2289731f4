import type { Reading } from '#shared/geometry/reading'
import { formatReading as formatShown } from '#shared/geometry/reading-format'
import type { MarkingBench } from './useMarkingBench'

/** Acts in a row are told together. */
const PAUSE_MS = 500

/** Says new readings to screen readers after each act, and only those that changed. */
export function useMarkingVoice({ settledReadings, marking }: { settledReadings: Ref<readonly Reading[]>, marking: MarkingBench['marking'] }) {
  const { t } = useI18n()
  const { announce } = useAnnounce()
  let told = new Map<string, string>()
  let toldStill: string | null = null

  function textOf(reading: Reading): string {
    const shown = formatShown(reading.value, reading.sd, reading.unit).text
    const status = reading.targetStatus ? `, ${t(`common.status.${reading.targetStatus}`)}` : ''
    return `${t(`measure.${reading.measure}.short`)} ${shown}${status}`
  }

  watchDebounced(settledReadings, (readings) => {
    const now = new Map(readings.map(reading => [`${reading.measure}.${reading.side ?? ''}`, textOf(reading)]))
    const isSameStill = toldStill === marking.value?.stillId
    const news = [...now].filter(([key, text]) => told.get(key) !== text).map(([, text]) => text)
    told = now
    toldStill = marking.value?.stillId ?? null
    if (isSameStill && news.length > 0) announce(news.join('. '))
  }, { debounce: PAUSE_MS })
}
