import type { Patient } from '#shared/schemas/patient'

export interface PatientFields {
  name: string
  recordNumber: string
  birthDate: string
  weakerSide: string
  height: string
  mass: string
  strokeOn: string
  precautions: { kind: string, note: string }[]
  lateropulsion: string
  neglectSide: string
  visualFieldLossSide: string
  hasAphasia: boolean
  notes: string
}

const EMPTY: PatientFields = {
  name: '', recordNumber: '', birthDate: '', weakerSide: '', height: '', mass: '', strokeOn: '', precautions: [],
  lateropulsion: '', neglectSide: '', visualFieldLossSide: '', hasAphasia: false, notes: '',
}

/** What the fields of the patient form hold, and how that becomes the body of a request. */
export function usePatientFields() {
  const format = useClinicFormat()

  function fieldsOf(patient: Patient | null): PatientFields {
    if (!patient) return { ...EMPTY, precautions: [] }
    return {
      name: patient.name,
      recordNumber: patient.recordNumber,
      birthDate: patient.birthDate,
      weakerSide: patient.weakerSide,
      height: patient.heightCm === null ? '' : format.lengthText(patient.heightCm),
      mass: patient.massKg === null ? '' : format.massText(patient.massKg),
      strokeOn: patient.strokeOn ?? '',
      precautions: patient.precautions.map(({ kind, note }) => ({ kind, note: note ?? '' })),
      lateropulsion: patient.lateropulsion ?? '',
      neglectSide: patient.neglectSide ?? '',
      visualFieldLossSide: patient.visualFieldLossSide ?? '',
      hasAphasia: patient.hasAphasia,
      notes: patient.notes ?? '',
    }
  }

  function inputOf(fields: PatientFields) {
    const [height, mass] = [toNumber(fields.height), toNumber(fields.mass)]
    return {
      name: fields.name,
      recordNumber: fields.recordNumber,
      birthDate: fields.birthDate,
      weakerSide: fields.weakerSide,
      heightCm: height === null ? null : format.lengthToCm(height),
      massKg: mass === null ? null : format.massToKg(mass),
      strokeOn: toText(fields.strokeOn),
      precautions: fields.precautions.map(({ kind, note }) => ({ kind, ...(note.trim() ? { note } : {}) })),
      lateropulsion: toText(fields.lateropulsion),
      neglectSide: toText(fields.neglectSide),
      visualFieldLossSide: toText(fields.visualFieldLossSide),
      hasAphasia: fields.hasAphasia,
      notes: toText(fields.notes),
    }
  }

  return { fieldsOf, inputOf }
}
