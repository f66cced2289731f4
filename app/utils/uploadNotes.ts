import { openDB, type IDBPDatabase } from 'idb'
import { usableNotes, type KeptUpload } from '~/upload/kept-upload'

const DATABASE = 'standmark-uploads'
const STORE = 'upload'

function open(): Promise<IDBPDatabase> {
  return openDB(DATABASE, 1, { upgrade: database => void database.createObjectStore(STORE, { keyPath: 'clipId' }) })
}

/** Notes of uploads that were begun in this browser. A browser that keeps nothing (private mode) only cannot go on after a reload. */
export async function readUploadNotes(userId: string): Promise<KeptUpload[]> {
  const database = await open().catch(() => null)
  if (!database) return []
  const found: unknown[] = await database.getAll(STORE)
  database.close()
  return usableNotes(found, userId, Date.now())
}

export async function keepUploadNote(note: KeptUpload): Promise<void> {
  const database = await open().catch(() => null)
  await database?.put(STORE, note)
  database?.close()
}

export async function dropUploadNote(clipId: string): Promise<void> {
  const database = await open().catch(() => null)
  await database?.delete(STORE, clipId)
  database?.close()
}
