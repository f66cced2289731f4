import type { Transaction } from '#server/database/client'
import { findDayBounds, listClipsThatWait, listPeople } from '#server/database/queries/home-queries'
import { listSessions } from '#server/database/queries/session-queries'
import { listReadingsOfPatients } from '#server/database/queries/timeline-queries'
import type { Home, HomeNeed, HomePerson } from '#shared/schemas/home'
import type { Actor } from './actor'
import { readClinic } from './clinic-transaction'
import { toSessionRow } from './session-service'
import { toTimelineReading } from './timeline-service'

const NEEDS_SHOWN = 20
const PEOPLE_SHOWN = 50

type Waiting = Awaited<ReturnType<typeof listClipsThatWait>>[number]

function needKind({ clip, draftStill }: Waiting): HomeNeed['kind'] {
  if (clip.status === 'refused') return 'clip-refused'
  if (clip.status === 'uploading') return 'clip-uploading'
  if (clip.status === 'processing') return 'clip-processing'
  return draftStill ? 'marking-draft' : 'clip-unmarked'
}

function toNeed(waiting: Waiting): HomeNeed {
  const { clip, patientName, draftStill } = waiting
  return {
    kind: needKind(waiting), patientId: clip.patientId, patientName, clipId: clip.id, stillId: draftStill, reason: clip.reason,
    at: (clip.recordedAt ?? clip.createdAt).toISOString(),
  }
}

async function readPeople(tx: Transaction, actor: Actor): Promise<HomePerson[]> {
  const people = await listPeople(tx, actor, PEOPLE_SHOWN)
  const readings = await listReadingsOfPatients(tx, people.map(person => person.patientId), 'trunkInclination')
  return people.map(person => ({
    ...person,
    trunk: readings.filter(row => row.reading.patientId === person.patientId).map(toTimelineReading),
  }))
}

/** What a therapist sees first: today in the clinic's time zone, what waits for them, their people. */
export function readHome(actor: Actor): Promise<Home> {
  return readClinic(actor, async (tx) => {
    const day = await findDayBounds(tx, actor.clinic.timeZone)
    const sessions = await listSessions(tx, actor, { from: day.from.toISOString(), to: day.to.toISOString(), page: 1, pageSize: 100, ascending: true })
    const waiting = await listClipsThatWait(tx, actor, NEEDS_SHOWN)
    return { today: sessions.rows.map(toSessionRow), needs: waiting.map(toNeed), people: await readPeople(tx, actor) }
  })
}
