import { createHash } from 'node:crypto'
import { createReadStream } from 'node:fs'
import { stat } from 'node:fs/promises'
import { Readable } from 'node:stream'
import {
  AbortMultipartUploadCommand, CreateMultipartUploadCommand, DeleteObjectCommand, GetObjectCommand, HeadBucketCommand,
  HeadObjectCommand, ListPartsCommand, PutObjectCommand, S3Client, UploadPartCommand,
} from '@aws-sdk/client-s3'
import { getSignedUrl } from '@aws-sdk/s3-request-presigner'
import { completeUpload } from './storage-complete'
import { isAbsent, StorageError, toStorageError } from './storage-error'

export interface StorageSettings { endpoint: string, publicEndpoint: string, region: string, bucket: string, key: string, secret: string }

/** One part as the storage holds it; `size` in bytes, `etag` without quotes. */
export interface StoredPart { partNumber: number, size: number, etag: string }
export interface StoredObject { size: number, etag: string, contentType: string | null }
/** Bytes `start` to `end`, both counted from 0 and both included. */
export interface ByteRange { start: number, end: number }

/** An upload goes to one key under one id; neither ever comes from a client. */
export interface UploadPlace { key: string, uploadId: string }

/** How long a signed part address can be used. Long enough for 8 MB on a ward's weakest network. */
export const PART_URL_SECONDS = 600
const CONNECT_MS = 3_000
/** A silent socket this long is dead. Completing an upload of 2 GB takes the storage a while. */
const SILENCE_MS = 60_000

function connect(settings: StorageSettings, endpoint: string): S3Client {
  return new S3Client({
    endpoint,
    region: settings.region,
    credentials: { accessKeyId: settings.key, secretAccessKey: settings.secret },
    forcePathStyle: true,
    // Not every S3 store knows the newer checksum headers; what we put carries Content-MD5.
    requestChecksumCalculation: 'WHEN_REQUIRED',
    responseChecksumValidation: 'WHEN_REQUIRED',
    maxAttempts: 3,
    requestHandler: { connectionTimeout: CONNECT_MS, requestTimeout: SILENCE_MS, throwOnRequestTimeout: true },
  })
}

async function listAllParts(client: S3Client, bucket: string, place: UploadPlace, pageSize: number): Promise<StoredPart[]> {
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

async function md5OfFile(path: string): Promise<string> {
  const hash = createHash('md5')
  for await (const chunk of createReadStream(path, { highWaterMark: 1 << 20 })) hash.update(Buffer.from(chunk))
  return hash.digest('base64')
}

/** @returns an entity tag as the storage sent it, without its quotes. */
export function bareEtag(etag: string): string {
  return etag.trim().replace(/^W\//, '').replaceAll('"', '')
}

/**
 * The S3-compatible storage. Every function throws `StorageError`; its `kind` says what happened.
 * @param partsPerPage how many parts one listing asks for; 1000 is the most a store gives
 */
export function createStorage(settings: StorageSettings, partsPerPage = 1000) {
  const { bucket } = settings
  const client = connect(settings, settings.endpoint)
  // The address a browser sees may differ from ours; a signature holds for the host it was made for.
  const signer = settings.publicEndpoint === settings.endpoint ? client : connect(settings, settings.publicEndpoint)

  async function guarded<Result>(what: string, work: () => Promise<Result>): Promise<Result> {
    try {
      return await work()
    } catch (error) {
      throw toStorageError(what, error)
    }
  }

  async function head(key: string): Promise<StoredObject | null> {
    try {
      const answer = await client.send(new HeadObjectCommand({ Bucket: bucket, Key: key }))
      return { size: answer.ContentLength ?? 0, etag: bareEtag(answer.ETag ?? ''), contentType: answer.ContentType ?? null }
    } catch (error) {
      if (isAbsent(error)) return null
      throw toStorageError('head', error)
    }
  }

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
    listParts: (place: UploadPlace): Promise<StoredPart[]> => guarded('list parts', () => listAllParts(client, bucket, place, partsPerPage)),

    /** Joins the parts to one object. */
    completeUpload: (place: UploadPlace, parts: readonly StoredPart[]): Promise<StoredObject> => completeUpload({ client, bucket, head }, place, parts),

    /** Ends an upload and drops its parts. An upload that is gone is no error. */
    async abortUpload(place: UploadPlace): Promise<void> {
      try {
        await client.send(new AbortMultipartUploadCommand({ Bucket: bucket, Key: place.key, UploadId: place.uploadId }))
      } catch (error) {
        if (!isAbsent(error)) throw toStorageError('abort upload', error)
      }
    },

    head,

    /**
     * Opens an object, or a stretch of it, for reading. The caller must read it to the end or destroy it;
     * aborting `signal` frees the connection at once.
     */
    async open(key: string, options: { range?: ByteRange, signal?: AbortSignal } = {}): Promise<Readable> {
      const { range, signal } = options
      const command = new GetObjectCommand({ Bucket: bucket, Key: key, ...(range ? { Range: `bytes=${range.start}-${range.end}` } : {}) })
      const answer = await guarded('open', () => client.send(command, signal ? { abortSignal: signal } : {}))
      if (!(answer.Body instanceof Readable)) throw new StorageError('refused', 'open: the storage gave no body')
      return answer.Body
    },

    /** Reads a small object, or a stretch, into memory. */
    async read(key: string, range?: ByteRange): Promise<Buffer> {
      const stream = await this.open(key, range ? { range } : {})
      return guarded('read', async () => {
        const chunks: Buffer[] = []
        for await (const chunk of stream) chunks.push(Buffer.from(chunk))
        return Buffer.concat(chunks)
      })
    },

    /** Keeps bytes or a local file under a key. What arrives is compared with what was sent (Content-MD5). */
    async put(key: string, body: Buffer | { path: string }, contentType: string): Promise<void> {
      await guarded('put', async () => {
        const isBytes = Buffer.isBuffer(body)
        const size = isBytes ? body.length : (await stat(body.path)).size
        const md5 = isBytes ? createHash('md5').update(body).digest('base64') : await md5OfFile(body.path)
        await client.send(new PutObjectCommand({
          Bucket: bucket, Key: key, ContentType: contentType, ContentLength: size, ContentMD5: md5, Body: isBytes ? body : createReadStream(body.path, { highWaterMark: 1 << 20 }),
        }))
      })
    },

    /** Deletes an object; one that is gone is no error. */
    async remove(key: string): Promise<void> {
      try {
        await client.send(new DeleteObjectCommand({ Bucket: bucket, Key: key }))
      } catch (error) {
        if (!isAbsent(error)) throw toStorageError('remove', error)
      }
    },

    /** Whether the bucket answers within a second and a half. */
    async isUp(): Promise<boolean> {
      try {
        await client.send(new HeadBucketCommand({ Bucket: bucket }), { abortSignal: AbortSignal.timeout(1_500) })
        return true
      } catch {
        return false
      }
    },

    close(): void {
      client.destroy()
      if (signer !== client) signer.destroy()
    },
  }
}

export type Storage = ReturnType<typeof createStorage>
