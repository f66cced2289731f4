import { openDB, type DBSchema, type IDBPDatabase } from 'idb'
import { usableNotes, type KeptUpload } from '~/upload/kept-upload'

interface NotesSchema extends DBSchema { upload: { key: string, value: KeptUpload } }
type Notes = IDBPDatabase<NotesSchema>

/** Set while the notes are being thrown away, so that a page that closes in the middle of it is finished by the next. */
const WIPING = 'standmark-uploads-wiping'

/** A browser that keeps nothing (private windows, a full disk) gives `otherwise`; then an upload cannot go on after a reload. */
async function withNotes<Result>(work: (notes: Notes) => Promise<Result>, otherwise: Result): Promise<Result> {
  try {
    const notes = await openDB<NotesSchema>('standmark-uploads', 1, { upgrade: database => void database.createObjectStore('upload', { keyPath: 'clipId' }) })
    try {
      return await work(notes)
    } finally {
      notes.close()
    }
  } catch {
    return otherwise
  }
}

/** @returns this person's notes of uploads that were begun in this browser, oldest first; old ones and those of others go. */
export async function readUploadNotes(userId: string): Promise<KeptUpload[]> {
  if (localStorage.getItem(WIPING) !== null) await wipeUploadNotes()
  return withNotes(async (notes) => {
    const all = await notes.getAll('upload')
    const usable = usableNotes(all, userId, Date.now())
    const kept = new Set(usable.map(note => note.clipId))
    for (const note of all) if (!kept.has(note.clipId)) await notes.delete('upload', note.clipId)
    return usable
  }, [])
}

export async function keepUploadNote(note: KeptUpload): Promise<void> {
  await withNotes(async notes => void await notes.put('upload', note), undefined)
}

export async function dropUploadNote(clipId: string): Promise<void> {
  await withNotes(notes => notes.delete('upload', clipId), undefined)
}

/** Throws all notes away: whoever signs out leaves nothing on a shared computer. */
export async function wipeUploadNotes(): Promise<void> {
  localStorage.setItem(WIPING, '1')
  const isDone = await withNotes(async (notes) => {
    await notes.clear('upload')
    return true
  }, false)
  if (isDone) localStorage.removeItem(WIPING)
}
