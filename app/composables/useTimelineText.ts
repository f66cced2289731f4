import type { Milestone, TimelineReading } from '#shared/schemas/timeline'

/** The words of the timeline. */
export function useTimelineText() {
  const { t, te } = useI18n()
  const format = useClinicFormat()
  const bouts = useBoutText()

  /** `Trunk lean`, `Knee bend` */
  function name(measure: string): string {
    return te(`measure.${measure}.short`) ? t(`measure.${measure}.short`) : measure
  }

  /** Which side, or what plus means. */
  function sub(series: TimelineSeries): string {
    if (series.role) return t(`timeline.side.${series.role}`)
    const key = `measure.${series.measure}.positive`
    return te(key) ? t('timeline.plusMeans', { words: t(key) }) : ''
  }

  function fullName(series: TimelineSeries): string {
    return series.role ? `${name(series.measure)}, ${t(`timeline.side.${series.role}`)}` : name(series.measure)
  }

  function status(reading: TimelineReading): string {
    return reading.targetStatus ? t(`common.status.${reading.targetStatus}`) : t('timeline.notJudged')
  }

  /** `partial, 1 helper` of the bout that speaks for the day. */
  function helpOf(day: TimelineDay): string {
    return day.chief ? bouts.help(day.chief) : ''
  }

  function milestone({ kind, to }: Milestone): string {
    if (kind === 'fewer-helpers') return t('timeline.milestone.fewer-helpers', Number(to ?? 0))
    if (kind === 'support-lowered') return t('timeline.milestone.support-lowered', { percent: format.percent(Number(to ?? 0)) })
    if (kind === 'less-assistance') return t(`timeline.milestone.less-assistance.${to ?? 'other'}`)
    return t(`timeline.milestone.${kind}`)
  }

  /** Everything of a day in one sentence, for screen readers. */
  function daySentence(day: TimelineDay, shown: readonly TimelineSeries[]): string {
    const readings = shown.map((series) => {
      const last = readingsOn(day, series).at(-1)
      return last ? `${fullName(series)} ${readingText(last).text}, ${status(last)}` : `${fullName(series)}: ${t('timeline.noStill')}`
    })
    const stood = day.totalMs > 0 ? t('timeline.stood', { longest: formatDuration(day.longestMs), total: formatDuration(day.totalMs) }) : t('timeline.noBout')
    const support = day.chief?.supportPercent == null ? '' : t('timeline.supportOf', { percent: format.percent(day.chief.supportPercent) })
    return [format.day(day.day), ...readings, stood, support, helpOf(day), ...day.milestones.map(milestone)].filter(Boolean).join('. ')
  }

  return { name, sub, fullName, status, helpOf, milestone, daySentence, format }
}
