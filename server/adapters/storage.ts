import { settings } from './settings'
import { connectStorage, type StorageSettings } from './storage-connection'
import { createObjects } from './storage-objects'
import { createUploads } from './storage-uploads'

/**
 * The S3-compatible storage. Every function throws `StorageError`; its `kind` says what happened.
 * @param partsPerPage how many parts one listing asks for; 1000 is the most a store gives
 */
export function createStorage(of: StorageSettings, partsPerPage = 1000) {
  const connection = connectStorage(of)
  return {
    ...createUploads(connection, partsPerPage),
    ...createObjects(connection),
    close(): void {
      connection.client.destroy()
      if (connection.signer !== connection.client) connection.signer.destroy()
    },
  }
}
export type Storage = ReturnType<typeof createStorage>

let current: Storage | undefined

/** The storage of this process, as the settings name it. */
export function storage(): Storage {
  current ??= createStorage(settings().storage)
  return current
}
