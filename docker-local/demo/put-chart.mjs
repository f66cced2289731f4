import { seededRandom } from '../../tests/fixtures/figure/ink.mjs'
import { birthDateFor, dayIn, daysBefore, visitStart } from './clinic-time.mjs'
import { CHECKLIST } from './scenario.mjs'

/**
 * One person's chart, consents, visits and bouts, written through the HTTP interface as the therapists would. What is there already
 * (the record number, a start time) is left as it is, so that a seeding that was cut off can be taken up again.
 */

const MINUTE = 60_000

/** `context`: `api` by member key, `members` (ids by key), `since` and `timeZone`. @returns the chart with its visits and their bouts. */
export async function putChart(context, patient) {
  const author = context.api[patient.team[0]]
  const chart = await putPatient(author, context, patient)
  await putTeam(author, context, patient, chart.id)
  await putConsents(author, context, patient, chart.id)
  const visits = []
  for (const [index, visit] of patient.visits.entries()) visits.push(await putVisit(context, patient, chart, visit, index))
  return { ...chart, visits }
}

const dayZero = ({ timeZone, since }) => dayIn(timeZone, since)

async function putPatient(author, context, patient) {
  const day = dayZero(context)
  const { items } = await author.get(`/api/patients?search=${encodeURIComponent(patient.recordNumber)}`)
  const known = items.find(item => item.recordNumber === patient.recordNumber)
  if (known) return known
  const { name, recordNumber, weakerSide, heightCm, massKg, precautions, lateropulsion, neglectSide, visualFieldLossSide, hasAphasia, notes } = patient
  return author.post('/api/patients', {
    name, recordNumber, weakerSide, heightCm, massKg, precautions, lateropulsion, neglectSide, visualFieldLossSide, hasAphasia, notes,
    birthDate: birthDateFor(day, patient.age, patient.birthday),
    strokeOn: daysBefore(day, patient.strokeDaysAgo),
  })
}

async function putTeam(author, { members }, patient, patientId) {
  const { careTeam } = await author.get(`/api/patients/${patientId}`)
  for (const key of patient.team) {
    if (!careTeam.some(member => member.userId === members[key])) await author.post(`/api/patients/${patientId}/care-team`, { userId: members[key] })
  }
}

async function putConsents(author, context, patient, patientId) {
  const day = dayZero(context)
  const { consents } = await author.get(`/api/patients/${patientId}`)
  for (const { kind, daysAgo, givenBy = patient.name, givenByRelation = 'self', note } of patient.consents) {
    if (!consents.some(consent => consent.kind === kind)) {
      await author.post(`/api/patients/${patientId}/consents`, { kind, givenOn: daysBefore(day, daysAgo), givenBy, givenByRelation, note })
    }
  }
}

async function putVisit(context, patient, chart, visit, index) {
  const author = context.api[visit.by]
  const start = visitStart(context, visit.daysAgo, patient.at)
  const startedAt = start.toISOString()
  const { items } = await author.get(`/api/patients/${chart.id}/sessions?pageSize=200`)
  const session = items.find(item => item.startedAt === startedAt) ?? await author.post(`/api/patients/${chart.id}/sessions`, {
    startedAt,
    ...(visit.notes ? { notes: visit.notes } : {}),
    checklist: visit.seconds.length > 0 ? CHECKLIST.map(item => ({ item, isDone: item !== 'Second person present' || visit.helpers > 0 })) : [],
  })
  const { bouts: known } = await author.get(`/api/sessions/${session.id}`)
  const bouts = []
  for (const bout of boutsOf(patient, visit, index, start)) {
    bouts.push(known.find(item => item.startedAt === bout.startedAt) ?? await author.post(`/api/sessions/${session.id}/bouts`, bout))
  }
  return { visit, session, bouts }
}

/** The bouts of a visit as the interface takes them: each after a rest, with vital signs before and during the stand. */
function boutsOf(patient, visit, visitIndex, start) {
  const random = seededRandom(visitIndex * 101 + patient.massKg)
  const near = (value, spread) => Math.round(value + (random() - 0.5) * 2 * spread)
  const last = visit.seconds.length - 1
  const weightOffKg = Math.round(patient.massKg * visit.support) / 100
  let clock = start.getTime() + 12 * MINUTE
  return visit.seconds.map((seconds, index) => {
    const startedAt = new Date(clock)
    const endedAt = new Date(clock + seconds * 1000)
    clock = endedAt.getTime() + (3 + 0.5 * index) * MINUTE
    return {
      startedAt: startedAt.toISOString(),
      endedAt: endedAt.toISOString(),
      weightOffKg,
      assistance: visit.assistance,
      helpers: visit.helpers,
      armSupport: true,
      exertion: visit.exertion[index],
      buckles: visit.buckles[index],
      pain: patient.key === 'walter' ? 2 : 0,
      aids: patient.aids,
      symptoms: index === last ? visit.symptoms ?? [] : [],
      vitals: vitalsOf(patient, visit, { startedAt, seconds, near }),
      endedBecause: index === last ? visit.ended ?? 'fatigue' : 'planned',
      ...(visit.cues && index > 0 ? { cues: visit.cues } : {}),
      ...(patient.key === 'nadia' && index === last ? loadsOf(patient, weightOffKg, visitIndex) : {}),
    }
  })
}

function vitalsOf(patient, visit, { startedAt, seconds, near }) {
  const [systolic, diastolic, heartRate, spo2, fall] = patient.vitals
  const at = offset => new Date(startedAt.getTime() + offset * 1000).toISOString()
  return [
    { at: at(-60), posture: 'sitting', systolic: near(systolic, 4), diastolic: near(diastolic, 3), heartRate: near(heartRate, 3), spo2: near(spo2, 1) },
    { at: at(Math.min(60, seconds - 5)), posture: 'standing', systolic: near(systolic - (visit.fall ?? fall), 3), diastolic: near(diastolic - 2, 2), heartRate: near(heartRate + 12, 4), spo2: near(spo2 - 1, 1) },
  ]
}

/** Two bathroom scales under the feet: from 70 % on the stronger leg to nearly even. */
function loadsOf(patient, weightOffKg, visitIndex) {
  const onFeet = patient.massKg - weightOffKg
  const share = 0.7 - 0.012 * visitIndex
  return { loadStrongerKg: Math.round(onFeet * share * 2) / 2, loadWeakerKg: Math.round(onFeet * (1 - share) * 2) / 2 }
}
