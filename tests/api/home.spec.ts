import { afterAll, describe, expect, it } from 'vitest'
import { HomeSchema } from '#shared/schemas/home'
import { expectBody, expectError } from '../fixtures/api/answers'
import { createClient } from '../fixtures/api/client'
import { closeDatabase, query } from '../fixtures/api/database'
import { makeAdministrator, makeClinic, makeStudent, makeTherapist } from '../fixtures/api/people'
import { makeBout, makeMarking, makePatient, makeSession, makeStill } from '../fixtures/api/records'

afterAll(closeDatabase)

/** A zone in which it is about noon now, so that no midnight passes during the test. Etc/GMT counts west positive. */
function zoneAtNoon(): string {
  const west = new Date().getUTCHours() - 12
  return `Etc/GMT${west < 0 ? west : `+${west}`}`
}

const clinic = await makeClinic('home', { timeZone: zoneAtNoon() })
const therapist = await makeTherapist(clinic)
const home = async (by = therapist) => expectBody(await by.client.get('/api/home'), 200, HomeSchema)

describe('GET /api/home', () => {
  it('lists the sessions of today in the clinic\'s own time zone, in order', async () => {
    const [day] = await query<{ start: Date }>(clinic.id, 'select date_trunc(\'day\', now() at time zone time_zone) at time zone time_zone as start from clinic where id = $1', [clinic.id])
    const at = (minutes: number) => new Date((day?.start.getTime() ?? Number.NaN) + minutes * 60_000).toISOString()
    const person = await makeTherapist(clinic)
    const patient = await makePatient(person, { name: 'Today' })
    const make = async (minutes: number) => (await makeSession(person, patient.id, { startedAt: at(minutes) })).id
    await make(-1)
    const evening = await make(24 * 60 - 1)
    const morning = await make(0)
    await make(24 * 60)
    const { today } = await home(person)
    expect(today.map(session => session.id)).toEqual([morning, evening])
    expect(today[0]).toMatchObject({ patientName: 'Today', boutCount: 0, isRunning: false })
  })

  it('lists what waits: clips on their way, refused, unmarked and marked as a draft, and not what is done', async () => {
    const person = await makeTherapist(clinic)
    const session = await makeSession(person, (await makePatient(person, { name: 'Waits' })).id)
    const clips = {
      uploading: await makeStill(person, session, { status: 'uploading' }),
      processing: await makeStill(person, session, { status: 'processing' }),
      refused: await makeStill(person, session, { status: 'refused' }),
      unmarked: await makeStill(person, session, { recordedAt: '2026-11-02T09:05:00Z' }),
      draft: await makeStill(person, session),
      done: await makeStill(person, session),
    }
    await makeMarking(person, clips.draft.stillId, { status: 'draft' })
    await makeMarking(person, clips.done.stillId)
    const { needs } = await home(person)
    const kindOf = (clipId: string) => needs.find(need => need.clipId === clipId)?.kind
    expect([kindOf(clips.uploading.clipId), kindOf(clips.processing.clipId), kindOf(clips.refused.clipId), kindOf(clips.unmarked.clipId), kindOf(clips.draft.clipId), kindOf(clips.done.clipId)])
      .toEqual(['clip-uploading', 'clip-processing', 'clip-refused', 'clip-unmarked', 'marking-draft', undefined])
    expect(needs.find(need => need.clipId === clips.refused.clipId)).toMatchObject({ reason: 'no-picture', stillId: null, patientName: 'Waits' })
    expect(needs.find(need => need.clipId === clips.draft.clipId)?.stillId).toBe(clips.draft.stillId)
    expect(needs.find(need => need.clipId === clips.unmarked.clipId)?.at).toBe('2026-11-02T09:05:00.000Z')
  })

  it('lists the person\'s people with trunk readings, longest bout and count of clips', async () => {
    const person = await makeTherapist(clinic)
    const [one, two] = [await makePatient(person, { name: 'B. Second', weakerSide: 'right' }), await makePatient(person, { name: 'A. First' })]
    const session = await makeSession(person, one.id)
    await makeBout(person, session.id)
    const place = await makeStill(person, session)
    await makeStill(person, session, { status: 'processing' })
    const marking = await makeMarking(person, place.stillId)
    const { people } = await home(person)
    expect(people.map(row => row.patientId)).toEqual([two.id, one.id])
    expect(people[0]).toEqual({ patientId: two.id, name: 'A. First', weakerSide: 'left', trunk: [], longestBoutMs: null, clipCount: 0 })
    expect(people[1]).toMatchObject({ name: 'B. Second', weakerSide: 'right', longestBoutMs: 120_000, clipCount: 1 })
    expect(people[1]?.trunk.map(reading => reading.value)).toEqual(marking.readings.filter(reading => reading.measure === 'trunkInclination').map(reading => reading.value))
  })

  it('shows nothing of other teams and other clinics', async () => {
    for (const other of [await makeTherapist(clinic), await makeTherapist(await makeClinic('home-elsewhere'))]) {
      const session = await makeSession(other, (await makePatient(other)).id, { startedAt: new Date().toISOString() })
      await makeStill(other, session)
    }
    expect(await home(await makeTherapist(clinic))).toEqual({ today: [], needs: [], people: [] })
  })

  it('answers 401 and 403', async () => {
    expectError(await createClient().get('/api/home'), 401, 'not-signed-in')
    for (const person of [await makeStudent(clinic), await makeAdministrator(clinic)]) expectError(await person.client.get('/api/home'), 403, 'not-allowed')
  })
})
