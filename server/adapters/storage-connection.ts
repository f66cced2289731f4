import { S3Client } from '@aws-sdk/client-s3'
import { toStorageError } from './storage-error'

export interface StorageSettings { endpoint: string, publicEndpoint: string, region: string, bucket: string, key: string, secret: string }

/** One part as the storage holds it; `size` in bytes, `etag` without quotes. */
export interface StoredPart { partNumber: number, size: number, etag: string }
export interface StoredObject { size: number, etag: string, contentType: string | null }
/** Bytes `start` to `end`, both counted from 0 and both included. */
export interface ByteRange { start: number, end: number }

/** An upload goes to one key under one id; neither ever comes from a client. */
export interface UploadPlace { key: string, uploadId: string }

/** `signer` signs for the address that a browser sees, which may differ from ours: a signature holds for one host. */
export interface StorageConnection { client: S3Client, signer: S3Client, bucket: string }

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

export function connectStorage(settings: StorageSettings): StorageConnection {
  const client = connect(settings, settings.endpoint)
  return { client, signer: settings.publicEndpoint === settings.endpoint ? client : connect(settings, settings.publicEndpoint), bucket: settings.bucket }
}

/** @returns an entity tag as the storage sent it, without its quotes. */
export function bareEtag(etag: string): string {
  return etag.trim().replace(/^W\//, '').replaceAll('"', '')
}

/** Runs one operation; what it throws becomes a StorageError that names it. */
export async function guarded<Result>(what: string, work: () => Promise<Result>): Promise<Result> {
  try {
    return await work()
  } catch (error) {
    throw toStorageError(what, error)
  }
}
