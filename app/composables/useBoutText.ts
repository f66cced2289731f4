import type { Bout } from '#shared/schemas/bout'

type Helped = Pick<Bout, 'assistance' | 'helpers'>
type Supported = Pick<Bout, 'supportPercent' | 'weightOffKg'>

/** Sentences about a bout: support, help, vital signs. */
export function useBoutText() {
  const { t } = useI18n()
  const format = useClinicFormat()

  /** `supervision, 1 helper` */
  function help({ assistance, helpers }: Helped): string {
    const level = t(`session.assistance.${assistance}`)
    return helpers === null ? level : `${level}, ${t('session.helpers', helpers)}`
  }

  /** `20 % of body mass, 14.4 kg off the feet` */
  function support({ supportPercent, weightOffKg }: Supported): string {
    if (weightOffKg === null) return t('session.supportUnknown')
    const off = t('session.weightOff', { mass: format.mass(weightOffKg) })
    return supportPercent === null ? off : `${t('session.ofBodyMass', { percent: format.percent(supportPercent) })}, ${off}`
  }

  /** `134/82 mmHg, 96 a minute, 97 % saturation` */
  function vitals({ systolic, diastolic, heartRate, spo2 }: Bout['vitals'][number]): string {
    const pressure = systolic || diastolic ? t('session.vitals.pressureValue', { systolic: systolic ?? '–', diastolic: diastolic ?? '–' }) : ''
    return [
      pressure,
      heartRate ? t('session.vitals.heartRateValue', { n: heartRate }) : '',
      spo2 ? t('session.vitals.spo2Value', { n: spo2 }) : '',
    ].filter(Boolean).join(', ')
  }

  return { help, support, vitals }
}
