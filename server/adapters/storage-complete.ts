import { CompleteMultipartUploadCommand, type S3Client } from '@aws-sdk/client-s3'
import type { StoredObject, StoredPart, UploadPlace } from './storage'
import { StorageError, toStorageError } from './storage-error'

interface Store { client: S3Client, bucket: string, head: (key: string) => Promise<StoredObject | null> }

const TRIES = 3
const PAUSE_MS = 500

async function tryOnce({ client, bucket }: Store, place: UploadPlace, parts: readonly StoredPart[]): Promise<StorageError | null> {
  try {
    await client.send(new CompleteMultipartUploadCommand({
      Bucket: bucket, Key: place.key, UploadId: place.uploadId,
      MultipartUpload: { Parts: parts.map(({ partNumber, etag }) => ({ PartNumber: partNumber, ETag: `"${etag}"` })) },
    }))
    return null
  } catch (error) {
    return toStorageError('complete upload', error)
  }
}

/**
 * Joins the parts of an upload. The answer proves nothing: it may be a 200 with an error in its body (the SDK throws
 * then), or be lost on the way while the object exists. So the object itself is asked for, also after an error.
 * @throws StorageError kind `bad-parts` when the parts do not fit, `absent` when there is neither upload nor object.
 */
export async function completeUpload(store: Store, place: UploadPlace, parts: readonly StoredPart[]): Promise<StoredObject> {
  let failure: StorageError | null = null
  for (let turn = 1; turn <= TRIES; turn += 1) {
    failure = await tryOnce(store, place, parts)
    const object = failure && failure.kind !== 'away' && failure.kind !== 'absent' ? null : await store.head(place.key)
    if (object) return object
    if (failure && failure.kind !== 'away') throw failure
    await new Promise(resolve => setTimeout(resolve, PAUSE_MS * turn))
  }
  throw failure ?? new StorageError('away', 'complete upload: the object does not show up')
}
