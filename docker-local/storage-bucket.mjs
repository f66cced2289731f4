import { fileURLToPath } from 'node:url'
import { complain, say } from './console.mjs'

/**
 * Creates the bucket for clips when it is absent.
 *
 *     STANDMARK_STORAGE_ENDPOINT=… STANDMARK_STORAGE_KEY=… STANDMARK_STORAGE_SECRET=… STANDMARK_STORAGE_BUCKET=… node docker-local/storage-bucket.mjs
 * @param {Record<string, string | undefined>} env the server's own settings
 */
export async function ensureBucket(env) {
  // The pinned SDK runs on this Node; its notice about later versions does not concern the person at the terminal.
  process.env.AWS_SDK_JS_NODE_VERSION_SUPPORT_WARNING_DISABLED = 'true'
  const { S3Client, HeadBucketCommand, CreateBucketCommand } = await import('@aws-sdk/client-s3')
  const bucket = required(env, 'STANDMARK_STORAGE_BUCKET')
  const client = new S3Client({
    endpoint: required(env, 'STANDMARK_STORAGE_ENDPOINT'),
    region: env.STANDMARK_STORAGE_REGION ?? 'us-east-1',
    credentials: { accessKeyId: required(env, 'STANDMARK_STORAGE_KEY'), secretAccessKey: required(env, 'STANDMARK_STORAGE_SECRET') },
    forcePathStyle: true,
    requestChecksumCalculation: 'WHEN_REQUIRED',
    responseChecksumValidation: 'WHEN_REQUIRED',
  })
  try {
    await client.send(new HeadBucketCommand({ Bucket: bucket }))
  } catch (error) {
    const isAbsent = error instanceof Error && (error.name === 'NotFound' || error.name === 'NoSuchBucket')
    if (!isAbsent) throw error
    await client.send(new CreateBucketCommand({ Bucket: bucket }))
  } finally {
    client.destroy()
  }
}

/**
 * @param {Record<string, string | undefined>} env
 * @param {string} name
 */
function required(env, name) {
  const value = env[name]
  if (!value) throw new Error(`${name} is not set`)
  return value
}

if (process.argv[1] === fileURLToPath(import.meta.url)) {
  ensureBucket(process.env).then(
    () => say('the bucket is there'),
    (error) => {
      complain(`standmark: the bucket could not be created: ${error instanceof Error ? error.message : error}`)
      process.exitCode = 1
    },
  )
}
