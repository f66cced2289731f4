import { createHash, randomBytes } from 'node:crypto'
import { uuidv7 } from '#server/adapters/id'
import { verifyPassword } from '#server/adapters/password'
import { inClinic, withoutClinic } from '#server/database/client'
import {
  beginAttempt, endOldSessions, findAccountSecret, findSession, insertSession, markAttemptSucceeded, revokeSession, type SessionRow,
} from '#server/database/queries/account-queries'
import type { Me, SignInInput } from '#shared/schemas/account'
import { ROLES } from '#shared/types/role'
import type { Actor } from './actor'
import { AppError } from './app-error'
import { recordAudit } from './audit-service'

/** Sign-in: ten failures of an account in fifteen minutes, then a pause. Successes never count. */
export const SIGN_IN_FAILURES = 10
export const SIGN_IN_WINDOW_SECONDS = 15 * 60
/** A session ends after this long without a request, and after twelve hours whatever happens. */
export const SESSION_IDLE_SECONDS = 60 * 60
export const SESSION_LIFETIME_SECONDS = 12 * 60 * 60
const SESSIONS_PER_PERSON = 10

/** SHA-256 of a session token; only this is kept. */
function hashToken(token: string): Buffer {
  return createHash('sha256').update(token).digest()
}

function toActor(row: SessionRow, requestId: string): Actor {
  return {
    userId: row.user_id,
    clinicId: row.clinic_id,
    sessionId: row.session_id,
    name: row.name,
    email: row.email,
    roles: ROLES.filter(role => row.roles.includes(role)),
    patientId: row.patient_id,
    clinic: { name: row.clinic_name, timeZone: row.time_zone, units: row.units },
    requestId,
  }
}

/** @returns the person as the interface shows them to themselves. */
export function toMe(actor: Actor): Me {
  return {
    id: actor.userId,
    name: actor.name,
    email: actor.email,
    roles: [...actor.roles],
    clinic: { id: actor.clinicId, ...actor.clinic },
    ...(actor.patientId ? { patientId: actor.patientId } : {}),
  }
}

/**
 * Checks address and password and opens a session.
 * @returns the token for the cookie (256 random bits, base64url) and the person.
 * @throws AppError `wrong-credentials` alike for an unknown address, a wrong password and a closed account;
 * `too-many-attempts` with the seconds to wait.
 */
export async function signIn(input: SignInInput, request: { requestId: string, userAgent: string | null, priorToken: string | null }): Promise<{ token: string, me: Me }> {
  const account = input.email.toLowerCase()
  const attemptId = uuidv7()
  const { wait, secret } = await withoutClinic(async tx => ({
    wait: await beginAttempt(tx, { id: attemptId, account, limit: SIGN_IN_FAILURES, windowSeconds: SIGN_IN_WINDOW_SECONDS }),
    secret: await findAccountSecret(tx, account),
  }))
  if (wait !== null) throw new AppError('too-many-attempts', { retryAfterSeconds: wait })
  // Hashing takes tens of milliseconds: outside of any transaction.
  const fits = await verifyPassword(secret?.password_hash ?? null, input.password)
  if (!secret || !fits || secret.is_disabled) {
    if (secret) await noteFailure(secret, request.requestId)
    throw new AppError('wrong-credentials')
  }
  const token = randomBytes(32).toString('base64url')
  const tokenHash = hashToken(token)
  await inClinic(secret.clinic_id, 'write', async (tx) => {
    const sessionId = uuidv7()
    await insertSession(tx, {
      id: sessionId, clinicId: secret.clinic_id, userId: secret.id, tokenHash,
      userAgent: request.userAgent?.slice(0, 200) ?? null, lifetimeSeconds: SESSION_LIFETIME_SECONDS,
    })
    await endOldSessions(tx, secret.id, SESSIONS_PER_PERSON)
    await markAttemptSucceeded(tx, attemptId)
    if (request.priorToken) await revokeSession(tx, hashToken(request.priorToken))
    await recordAudit(tx, { clinicId: secret.clinic_id, userId: secret.id, sessionId, requestId: request.requestId }, 'account.sign-in', { type: 'user', id: secret.id })
  })
  const actor = await findActor(token, request.requestId)
  if (!actor) throw new AppError('wrong-credentials')
  return { token, me: toMe(actor) }
}

async function noteFailure(secret: { id: string, clinic_id: string }, requestId: string): Promise<void> {
  await inClinic(secret.clinic_id, 'write', tx =>
    recordAudit(tx, { clinicId: secret.clinic_id, requestId }, 'account.sign-in-failed', { type: 'user', id: secret.id }))
}

/** @returns who holds this token, or null when its session is unknown, ended, idle for too long or its account closed. */
export async function findActor(token: string, requestId: string): Promise<Actor | null> {
  const row = await withoutClinic(tx => findSession(tx, hashToken(token), SESSION_IDLE_SECONDS))
  return row ? toActor(row, requestId) : null
}

/** Ends the session on the server: a copy of its cookie is worth nothing from now on. */
export async function signOut(actor: Actor, token: string): Promise<void> {
  await inClinic(actor.clinicId, 'write', async (tx) => {
    await revokeSession(tx, hashToken(token))
    await recordAudit(tx, actor, 'account.sign-out', { type: 'user', id: actor.userId })
  })
}
