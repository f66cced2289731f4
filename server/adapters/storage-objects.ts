import { createHash } from 'node:crypto'
import { createReadStream } from 'node:fs'
import { stat } from 'node:fs/promises'
import { Readable } from 'node:stream'
import { DeleteObjectCommand, GetObjectCommand, HeadBucketCommand, HeadObjectCommand, PutObjectCommand } from '@aws-sdk/client-s3'
import { bareEtag, guarded, type ByteRange, type StorageConnection, type StoredObject } from './storage-connection'
import { isAbsent, StorageError, toStorageError } from './storage-error'

const READ_AHEAD = 1024 * 1024
const HEALTH_MS = 1_500

/** @returns what is known of an object, or null when there is none. */
export async function headObject({ client, bucket }: StorageConnection, key: string): Promise<StoredObject | null> {
  try {
    const answer = await client.send(new HeadObjectCommand({ Bucket: bucket, Key: key }))
    return { size: answer.ContentLength ?? 0, etag: bareEtag(answer.ETag ?? ''), contentType: answer.ContentType ?? null }
  } catch (error) {
    if (isAbsent(error)) return null
    throw toStorageError('head', error)
  }
}

async function openObject({ client, bucket }: StorageConnection, key: string, options: { range?: ByteRange, signal?: AbortSignal }): Promise<Readable> {
  const { range, signal } = options
  const command = new GetObjectCommand({ Bucket: bucket, Key: key, ...(range ? { Range: `bytes=${range.start}-${range.end}` } : {}) })
  const answer = await guarded('open', () => client.send(command, signal ? { abortSignal: signal } : {}))
  if (!(answer.Body instanceof Readable)) throw new StorageError('refused', 'open: the storage gave no body')
  return answer.Body
}

async function readObject(connection: StorageConnection, key: string, range?: ByteRange): Promise<Buffer> {
  const stream = await openObject(connection, key, range ? { range } : {})
  return guarded('read', async () => {
    const chunks: Buffer[] = []
    for await (const chunk of stream) chunks.push(Buffer.from(chunk))
    return Buffer.concat(chunks)
  })
}

async function describeBody(body: Buffer | { path: string }) {
  const hash = createHash('md5')
  if (Buffer.isBuffer(body)) return { size: body.length, md5: hash.update(body).digest('base64'), stream: body }
  for await (const chunk of createReadStream(body.path, { highWaterMark: READ_AHEAD })) hash.update(Buffer.from(chunk))
  return { size: (await stat(body.path)).size, md5: hash.digest('base64'), stream: createReadStream(body.path, { highWaterMark: READ_AHEAD }) }
}

/** Single objects. */
export function createObjects(connection: StorageConnection) {
  const { client, bucket } = connection
  return {
    head: (key: string): Promise<StoredObject | null> => headObject(connection, key),

    /**
     * Opens an object, or a stretch of it, for reading. The caller must read it to the end or destroy it;
     * aborting `signal` frees the connection at once.
     */
    open: (key: string, options: { range?: ByteRange, signal?: AbortSignal } = {}): Promise<Readable> => openObject(connection, key, options),

    /** Reads a small object, or a stretch, into memory. */
    read: (key: string, range?: ByteRange): Promise<Buffer> => readObject(connection, key, range),

    /** Keeps bytes or a local file under a key. What arrives is compared with what was sent (Content-MD5). */
    async put(key: string, body: Buffer | { path: string }, contentType: string): Promise<void> {
      await guarded('put', async () => {
        const { size, md5, stream } = await describeBody(body)
        await client.send(new PutObjectCommand({ Bucket: bucket, Key: key, ContentType: contentType, ContentLength: size, ContentMD5: md5, Body: stream }))
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
        await client.send(new HeadBucketCommand({ Bucket: bucket }), { abortSignal: AbortSignal.timeout(HEALTH_MS) })
        return true
      } catch {
        return false
      }
    },
  }
}
