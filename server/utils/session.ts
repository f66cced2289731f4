import { getCookie, unsealSession, type H3Event } from 'h3'
import type { Actor } from '#server/services/actor'
import { findActor } from '#server/services/account-service'
import { settings } from '#server/adapters/settings'

/**
 * The cookie is a seal of nuxt-auth-utils that holds nothing but a random token; who it is, and whether the
 * session still lives, stands in the database and is asked at every request (a seal alone cannot be revoked).
 */
const SEAL_MAX_AGE_SECONDS = 43_200

/** Secure cookies and their name prefix need https; the demo runs on plain http on loopback. */
export function sessionCookieName(): string {
  return settings().mode === 'demo' ? 'standmark' : '__Host-standmark'
}

function sessionConfig() {
  return {
    name: sessionCookieName(),
    password: settings().secret,
    maxAge: SEAL_MAX_AGE_SECONDS,
    sessionHeader: false as const,
    cookie: { path: '/', httpOnly: true, sameSite: 'lax' as const, secure: settings().mode === 'production' },
  }
}

/** Opening a seal costs about a millisecond and depends on the cookie alone, so the last ones are kept. Liveness is never kept. */
const opened = new Map<string, string>()
const OPENED_LIMIT = 1000

function tokenOf(session: { data: object } | null): string | null {
  const secure: unknown = session ? Reflect.get(session.data, 'secure') : null
  const token: unknown = secure && typeof secure === 'object' ? Reflect.get(secure, 'token') : null
  return typeof token === 'string' ? token : null
}

/** @returns the token in the request's cookie, or null without a cookie of ours. */
export async function readSessionToken(event: H3Event): Promise<string | null> {
  const config = sessionConfig()
  const seal = getCookie(event, config.name)
  if (!seal || seal.length > 4096) return null
  const known = opened.get(seal)
  if (known) return known
  const unsealed = await unsealSession(event, config, seal).catch(() => null)
  const token = tokenOf(unsealed?.data ? { data: unsealed.data } : null)
  if (!token) return null
  if (opened.size >= OPENED_LIMIT) opened.delete(opened.keys().next().value ?? '')
  opened.set(seal, token)
  return token
}

/** Puts a new token into the cookie; the seal's only field is overwritten, so nothing of an earlier person survives. */
export async function writeSessionToken(event: H3Event, token: string): Promise<void> {
  await setUserSession(event, { secure: { token } }, sessionConfig())
}

export async function clearSessionToken(event: H3Event): Promise<void> {
  await clearUserSession(event, sessionConfig())
}

/** @returns who sends this request, asked once per request. */
export function readActor(event: H3Event): Promise<Actor | null> {
  event.context.actor ??= readSessionToken(event).then(token => token ? findActor(token, event.context.requestId) : null)
  return event.context.actor
}

/** @returns whether the session lives at this moment: an answer that takes long asks again. */
export async function isSignedInStill(event: H3Event): Promise<boolean> {
  const token = await readSessionToken(event)
  return token !== null && await findActor(token, event.context.requestId) !== null
}

declare module '#auth-utils' {
  interface SecureSessionData { token: string }
}

declare module 'h3' {
  interface H3EventContext {
    requestId: string
    actor?: Promise<Actor | null>
  }
}
