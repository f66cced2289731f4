import { hash, verify } from '@node-rs/argon2'

/** Argon2id, 19 MiB, 2 passes, 1 lane: the floor of the OWASP Password Storage Cheat Sheet. */
const ARGON2ID = { algorithm: 2, memoryCost: 19_456, timeCost: 2, parallelism: 1 } as const

/** Each hash takes a core for some tens of milliseconds and 19 MiB: more than this many at once would starve the wards. */
const MAX_AT_ONCE = 2
let running = 0
const waiting: (() => void)[] = []

async function inTurn<Result>(work: () => Promise<Result>): Promise<Result> {
  if (running >= MAX_AT_ONCE) await new Promise<void>(resolve => waiting.push(resolve))
  running += 1
  try {
    return await work()
  } finally {
    running -= 1
    waiting.shift()?.()
  }
}

/** @returns the hash in PHC form, with its parameters. */
export function hashPassword(password: string): Promise<string> {
  return inTurn(() => hash(password, ARGON2ID))
}

let decoy: Promise<string> | undefined

/**
 * @param stored the kept hash, or null when there is no such account: then a decoy is hashed against, so that
 * an unknown address takes as long as a wrong password.
 */
export async function verifyPassword(stored: string | null, password: string): Promise<boolean> {
  decoy ??= hashPassword('a password that opens nothing')
  const against = stored ?? await decoy
  const fits = await inTurn(() => verify(against, password))
  return stored !== null && fits
}
