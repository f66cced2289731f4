import type { Patient, Precaution } from '#shared/schemas/patient'

/** Sentences about a person: age, weaker side, weeks after the stroke, precautions. */
export function usePatientText() {
  const { t } = useI18n()
  const format = useClinicFormat()
  const today = useToday()

  function ageText(birthDate: string): string {
    return t('patient.age', { years: ageOn(birthDate, today.value) })
  }

  function afterStroke(strokeOn: string): string {
    const weeks = weeksBetween(strokeOn, today.value)
    return weeks < 104 ? t('patient.weeksAfterStroke', Math.max(0, weeks)) : t('patient.yearsAfterStroke', Math.floor(weeks / 52.1775))
  }

  /** `58, right side weaker, 11 weeks after stroke` */
  function summary(patient: Pick<Patient, 'birthDate' | 'weakerSide' | 'strokeOn'>): string {
    const parts = [String(ageOn(patient.birthDate, today.value)), t(`patient.weaker.${patient.weakerSide}`)]
    return [...parts, ...(patient.strokeOn ? [afterStroke(patient.strokeOn)] : [])].join(', ')
  }

  function precautionText({ kind, note }: Precaution): string {
    if (kind === 'other' && note) return note
    const name = t(`patient.precaution.${kind}`)
    return note ? `${name}: ${note}` : name
  }

  return { ageText, summary, precautionText, format }
}
