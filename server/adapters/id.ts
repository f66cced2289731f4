import { v7 } from 'uuid'

/** A new id: UUIDv7, so that ids sort by time. Not a secret. */
export function uuidv7(): string {
  return v7()
}
