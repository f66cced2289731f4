/** A file as far as it can be told again: the browser's `File` is one. */
export interface NamedFile extends Blob { readonly name: string, readonly lastModified: number }

const EDGE_BYTES = 65_536

/**
 * Tells whether a file that is picked again is the one that was begun: its name, size and time, and its first and last
 * 64 KiB, hashed to one word, so that no name of a file (it may hold a person's) is kept in the browser.
 * @returns 64 hexadecimal digits (SHA-256)
 * @throws when the file cannot be read
 */
export async function fingerprintOf(file: NamedFile): Promise<string> {
  const edges = await Promise.all([
    hashOf(file.slice(0, EDGE_BYTES)),
    hashOf(file.slice(Math.max(0, file.size - EDGE_BYTES))),
  ])
  // Some systems write an accent as a sign of its own: the same name all the same.
  const told = JSON.stringify([file.name.normalize('NFC'), file.size, file.lastModified, ...edges])
  return hashOf(new Blob([told]))
}

async function hashOf(bytes: Blob): Promise<string> {
  const digest = await crypto.subtle.digest('SHA-256', await bytes.arrayBuffer())
  return Array.from(new Uint8Array(digest), byte => byte.toString(16).padStart(2, '0')).join('')
}
