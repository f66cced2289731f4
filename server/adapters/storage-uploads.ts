import { AbortMultipartUploadCommand, CompleteMultipartUploadCommand, CreateMultipartUploadCommand, ListPartsCommand, UploadPartCommand } from '@aws-sdk/client-s3'
import { getSignedUrl } from '@aws-sdk/s3-request-presigner'
import { bareEtag, guarded, type StorageConnection, type StoredObject, type StoredPart, type UploadPlace } from './storage-connection'
import { isAbsent, StorageError, toStorageError } from './storage-error'
import { headObject } from './storage-objects'

/** How long a signed part address can be used. Long enough for 8 MB on a ward's weakest network. */
export const PART_URL_SECONDS = 600
const TRIES = 3
const PAUSE_MS = 500

async function listAllParts({ client, bucket }: StorageConnection, place: UploadPlace, pageSize: number): Promise<StoredPart[]> {
  const parts: StoredPart[] = []
  let marker: string | undefined
  do {
    const page = await client.send(new ListPartsCommand({ Bucket: bucket, Key: place.key, UploadId: place.uploadId, PartNumberMarker: marker, MaxParts: pageSize }))
    for (const part of page.Parts ?? []) {
      if (part.PartNumber !== undefined) parts.push({ partNumber: part.PartNumber, size: part.Size ?? 0, etag: bareEtag(part.ETag ?? '') })
    }
    marker = page.IsTruncated ? page.NextPartNumberMarker : undefined
  } while (marker)
  return parts.sort((a, b) => a.partNumber - b.partNumber)
}

async function tryToComplete({ client, bucket }: StorageConnection, place: UploadPlace, parts: readonly StoredPart[]): Promise<StorageError | null> {
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
 * @throws StorageError kind `bad-parts` when the parts do not fit, `absent` when there is neither upload nor object
 */
async function completeUpload(connection: StorageConnection, place: UploadPlace, parts: readonly StoredPart[]): Promise<StoredObject> {
  let failure: StorageError | null = null
  for (let turn = 1; turn <= TRIES; turn += 1) {
    failure = await tryToComplete(connection, place, parts)
    const mayExist = !failure || failure.kind === 'away' || failure.kind === 'absent'
    const object = mayExist ? await headObject(connection, place.key) : null
    if (object) return object
    if (failure && failure.kind !== 'away') throw failure
    await new Promise(resolve => setTimeout(resolve, PAUSE_MS * turn))
  }
  throw failure ?? new StorageError('away', 'complete upload: the object does not show up')
}

/** Multi-part uploads. @param partsPerPage how many parts one listing asks for; 1000 is the most a store gives */
export function createUploads(connection: StorageConnection, partsPerPage: number) {
  const { client, signer, bucket } = connection
  return {
    /** Begins a multi-part upload and returns its id. */
    async createUpload(key: string, contentType: string): Promise<string> {
      const answer = await guarded('create upload', () => client.send(new CreateMultipartUploadCommand({ Bucket: bucket, Key: key, ContentType: contentType })))
      if (!answer.UploadId) throw new StorageError('refused', 'create upload: the storage gave no id')
      return answer.UploadId
    },

    /** An address that takes exactly `size` bytes as this part, for ten minutes: the length is part of the signature. */
    signPart(place: UploadPlace, partNumber: number, size: number): Promise<string> {
      const command = new UploadPartCommand({ Bucket: bucket, Key: place.key, UploadId: place.uploadId, PartNumber: partNumber, ContentLength: size })
      return guarded('sign part', () => getSignedUrl(signer, command, { expiresIn: PART_URL_SECONDS, signableHeaders: new Set(['host', 'content-length']) }))
    },

    /** The parts that the storage holds, in order. Throws kind `absent` when the upload is not open any more. */
    listParts: (place: UploadPlace): Promise<StoredPart[]> => guarded('list parts', () => listAllParts(connection, place, partsPerPage)),

    /** Joins the parts to one object. */
    completeUpload: (place: UploadPlace, parts: readonly StoredPart[]): Promise<StoredObject> => completeUpload(connection, place, parts),

    /** Ends an upload and drops its parts. An upload that is gone is no error. */
    async abortUpload(place: UploadPlace): Promise<void> {
      try {
        await client.send(new AbortMultipartUploadCommand({ Bucket: bucket, Key: place.key, UploadId: place.uploadId }))
      } catch (error) {
        if (!isAbsent(error)) throw toStorageError('abort upload', error)
      }
    },
  }
}
