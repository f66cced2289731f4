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
  const shown: Shown = {
    clock: moment => moment ? format.clockOf(moment) : '',
    mass: kg => typeof kg === 'number' ? format.massText(kg) : '',
  }
  const read: Read = {
    moment: (day, text) => momentOn(day, text, format.zone.value),
    mass: (text) => {
      const typed = toNumber(text)
      return typed === null ? null : format.massToKg(typed)
    },
  }
  return {
    freshFields: (before: Bout | undefined) => freshFields(before, shown),
    fieldsOf: (bout: Bout) => fieldsOf(bout, shown),
    inputOf: (fields: BoutFields, day: string) => inputOf(fields, day, read),
    sessionDay: format.dayOf(session.startedAt),
  }
}

interface Shown { clock: (moment: string | null) => string, mass: (kg: number | null | undefined) => string }
interface Read { moment: (day: string, text: string) => string | null, mass: (text: string) => number | null }

/** A new bout starts now, with the support and help of the one before. */
function freshFields(before: Bout | undefined, shown: Shown): BoutFields {
  return {
    start: shown.clock(new Date().toISOString()), end: '',
    weightOff: shown.mass(before?.weightOffKg), assistance: before?.assistance ?? '', helpers: fromNumber(before?.helpers), armSupport: before?.armSupport ?? false,
    exertion: '', pain: '', buckles: '', symptoms: [], loadStronger: '', loadWeaker: '', aids: [...(before?.aids ?? [])],
    cues: '', endedBecause: '', endedNote: '', vitals: [],
  }
}

function fieldsOf(bout: Bout, shown: Shown): BoutFields {
  return {
    start: shown.clock(bout.startedAt), end: shown.clock(bout.endedAt),
    weightOff: shown.mass(bout.weightOffKg), assistance: bout.assistance, helpers: fromNumber(bout.helpers), armSupport: bout.armSupport,
    exertion: fromNumber(bout.exertion), pain: fromNumber(bout.pain), buckles: fromNumber(bout.buckles), symptoms: [...bout.symptoms],
    loadStronger: shown.mass(bout.loadStrongerKg), loadWeaker: shown.mass(bout.loadWeakerKg), aids: [...bout.aids],
    cues: bout.cues ?? '', endedBecause: bout.endedBecause ?? '', endedNote: bout.endedNote ?? '',
    vitals: bout.vitals.map(row => ({
      clock: shown.clock(row.at), posture: row.posture, systolic: fromNumber(row.systolic), diastolic: fromNumber(row.diastolic), heartRate: fromNumber(row.heartRate), spo2: fromNumber(row.spo2),
    })),
  }
}

/** @param day the clinic's day of the bout. A time that is none is passed on, for the schema to refuse at its field. */
function inputOf(fields: BoutFields, day: string, read: Read) {
  return {
    startedAt: read.moment(day, fields.start) ?? fields.start,
    endedAt: fields.end.trim() === '' ? null : read.moment(day, fields.end) ?? fields.end,
    weightOffKg: read.mass(fields.weightOff),
    assistance: fields.assistance,
    helpers: toNumber(fields.helpers),
    armSupport: fields.armSupport,
    exertion: toNumber(fields.exertion),
    pain: toNumber(fields.pain),
    buckles: toNumber(fields.buckles),
    symptoms: fields.symptoms,
    loadStrongerKg: read.mass(fields.loadStronger),
    loadWeakerKg: read.mass(fields.loadWeaker),
    aids: fields.aids,
    cues: toText(fields.cues),
    endedBecause: toText(fields.endedBecause),
    endedNote: toText(fields.endedNote),
    vitals: fields.vitals.map(row => ({
      at: read.moment(day, row.clock) ?? row.clock, posture: row.posture,
      systolic: toNumber(row.systolic), diastolic: toNumber(row.diastolic), heartRate: toNumber(row.heartRate), spo2: toNumber(row.spo2),
    })),
  }
}
