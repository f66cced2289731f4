import type { UploadEntry } from '~/stores/useUploadStore'
import { remainingOf } from '~/upload/transfer-rate'

const MEGABYTE = 1_000_000

/** Words for clips and uploads. */
export function useClipText() {
  const { t, te } = useI18n()

  /** Bytes as people say them. */
  function sizeText(bytes: number): string {
    if (bytes >= 1000 * MEGABYTE) return t('clip.size.gb', { value: (bytes / MEGABYTE / 1000).toFixed(1) })
    return bytes >= MEGABYTE ? t('clip.size.mb', { value: Math.round(bytes / MEGABYTE) }) : t('clip.size.kb', { value: Math.ceil(bytes / 1000) })
  }

  function remainingText({ status, rate }: UploadEntry): string {
    if (rate === null) return t('clip.phase.sending')
    const remaining = remainingOf(status.totalBytes - status.sentBytes, rate)
    if (remaining.unit === 'moments') return t('clip.remaining.moments')
    if (remaining.unit === 'hours') return t('clip.remaining.hours', { hours: remaining.count, minutes: remaining.minutes })
    return t(`clip.remaining.${remaining.unit}`, { count: remaining.count }, remaining.count)
  }

  function problemText(code: string): string {
    if (te(`clip.problem.${code}`)) return t(`clip.problem.${code}`)
    return te(`errors.${code}`) ? t(`errors.${code}`) : t('clip.problem.unexpected')
  }

  /** Where an upload stands, in one line. */
  function statusText(entry: UploadEntry): string {
    const { phase, pause, problem, reason } = entry.status
    if (pause) return t(`clip.pause.${pause}`)
    if (phase === 'sending') return remainingText(entry)
    if (phase === 'stopped' && problem) return problemText(problem.code)
    if (phase === 'refused' && reason) return t(`clip.refused.${reason}`)
    return t(`clip.phase.${phase}`)
  }

  return { sizeText, statusText }
}
