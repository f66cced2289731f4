import type { Bout } from '#shared/schemas/bout'
import type { SessionDetail } from '#shared/schemas/session'

export interface VitalsFields { clock: string, posture: string, systolic: string, diastolic: string, heartRate: string, spo2: string }

export interface BoutFields {
  start: string
  end: string
  weightOff: string
  assistance: string
  helpers: string
  armSupport: boolean
  exertion: string
  pain: string
  buckles: string
  symptoms: string[]
  loadStronger: string
  loadWeaker: string
  aids: string[]
  cues: string
  endedBecause: string
  endedNote: string
  vitals: VitalsFields[]
}

/** What the fields of the bout form hold, and how that becomes the body of a request. Clock times are of the session's day. */
export function useBoutFields(session: SessionDetail) {
  const format = useClinicFormat()
  const clock = (moment: string | null | undefined) => moment ? format.clockOf(moment) : ''
  const massField = (kg: number | null | undefined) => typeof kg === 'number' ? format.massText(kg) : ''

  /** A new bout starts now, with the support and help of the one before. */
  function freshFields(before: Bout | undefined): BoutFields {
    return {
      start: clock(new Date().toISOString()), end: '',
      weightOff: massField(before?.weightOffKg), assistance: before?.assistance ?? '', helpers: fromNumber(before?.helpers), armSupport: before?.armSupport ?? false,
      exertion: '', pain: '', buckles: '', symptoms: [], loadStronger: '', loadWeaker: '', aids: [...(before?.aids ?? [])],
      cues: '', endedBecause: '', endedNote: '', vitals: [],
    }
  }

  function fieldsOf(bout: Bout): BoutFields {
    return {
      start: clock(bout.startedAt), end: clock(bout.endedAt),
      weightOff: massField(bout.weightOffKg), assistance: bout.assistance, helpers: fromNumber(bout.helpers), armSupport: bout.armSupport,
      exertion: fromNumber(bout.exertion), pain: fromNumber(bout.pain), buckles: fromNumber(bout.buckles), symptoms: [...bout.symptoms],
      loadStronger: massField(bout.loadStrongerKg), loadWeaker: massField(bout.loadWeakerKg), aids: [...bout.aids],
      cues: bout.cues ?? '', endedBecause: bout.endedBecause ?? '', endedNote: bout.endedNote ?? '',
      vitals: bout.vitals.map(row => ({
        clock: clock(row.at), posture: row.posture, systolic: fromNumber(row.systolic), diastolic: fromNumber(row.diastolic), heartRate: fromNumber(row.heartRate), spo2: fromNumber(row.spo2),
      })),
    }
  }

  function massOf(text: string): number | null {
    const shown = toNumber(text)
    return shown === null ? null : format.massToKg(shown)
  }

  /** @param day the clinic's day of the bout. */
  function inputOf(fields: BoutFields, day: string) {
    const moment = (text: string) => momentOn(day, text, format.zone.value)
    return {
      // No time at all is refused by the schema at its field.
      startedAt: moment(fields.start) ?? fields.start,
      endedAt: fields.end.trim() === '' ? null : moment(fields.end) ?? fields.end,
      weightOffKg: massOf(fields.weightOff),
      assistance: fields.assistance,
      helpers: toNumber(fields.helpers),
      armSupport: fields.armSupport,
      exertion: toNumber(fields.exertion),
      pain: toNumber(fields.pain),
      buckles: toNumber(fields.buckles),
      symptoms: fields.symptoms,
      loadStrongerKg: massOf(fields.loadStronger),
      loadWeakerKg: massOf(fields.loadWeaker),
      aids: fields.aids,
      cues: toText(fields.cues),
      endedBecause: toText(fields.endedBecause),
      endedNote: toText(fields.endedNote),
      vitals: fields.vitals.map(row => ({
        at: moment(row.clock) ?? row.clock, posture: row.posture,
        systolic: toNumber(row.systolic), diastolic: toNumber(row.diastolic), heartRate: toNumber(row.heartRate), spo2: toNumber(row.spo2),
      })),
    }
  }

  const sessionDay = format.dayOf(session.startedAt)
  return { freshFields, fieldsOf, inputOf, massOf, sessionDay }
}
