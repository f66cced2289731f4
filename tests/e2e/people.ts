import { makeClinic, makeTherapist, PASSWORD, type Clinic, type Person } from '../fixtures/api/people'
import { makeConsent, makePatient, makeSession } from '../fixtures/api/records'

/** The sign-ins of the demo clinic, which the stack under test is seeded with. */
export const DEMO_PASSWORD = 'stand-tall-together'
export const DEMO = {
  therapist: { email: 'therapist@alderbay.example', password: DEMO_PASSWORD },
  student: { email: 'student@alderbay.example', password: DEMO_PASSWORD },
  patient: { email: 'patient@alderbay.example', password: DEMO_PASSWORD },
  administrator: { email: 'admin@alderbay.example', password: DEMO_PASSWORD },
  otherClinic: { email: 'therapist@otherclinic.example', password: DEMO_PASSWORD },
} as const

/** How a person of the fixtures signs in through the form. */
export function credentials(person: Person): { email: string, password: string } {
  return { email: person.email, password: PASSWORD }
}

export interface Ward { clinic: Clinic, therapist: Person, patientId: string, patientName: string, sessionId: string }

/** A clinic of its own with a therapist, a patient whose recording consent is given, and a session. */
export async function makeWard(): Promise<Ward> {
  const clinic = await makeClinic()
  const therapist = await makeTherapist(clinic)
  const patient = await makePatient(therapist)
  await makeConsent(therapist, patient.id)
  const session = await makeSession(therapist, patient.id)
  return { clinic, therapist, patientId: patient.id, patientName: patient.name, sessionId: session.id }
}
