import type { Role } from '#shared/types/role'

/** An answer that must be kept under an Idempotency-Key, in the transaction of its effect. */
export interface IdempotentRequest { route: string, key: string, status: number, isDone: boolean }

/** Who acts, in which clinic, in which request. */
export interface Actor {
  userId: string
  clinicId: string
  sessionId: string
  name: string
  email: string
  roles: readonly Role[]
  patientId: string | null
  clinic: { name: string, timeZone: string, units: 'metric' | 'us' }
  requestId: string
  idempotent?: IdempotentRequest
}

/** The least that an audit row and a clinic's transaction need; jobs have no person behind them. */
export type ClinicScope = Pick<Actor, 'clinicId' | 'requestId'> & Partial<Pick<Actor, 'userId' | 'sessionId'>>
