/** Everything that the server is told from outside, read once from the environment. */
export interface Settings {
  mode: 'demo' | 'production'
  role: 'all' | 'web' | 'worker'
  origins: readonly string[]
  secret: string
  databaseUrl: string
  storage: { endpoint: string, publicEndpoint: string, region: string, bucket: string, key: string, secret: string }
  smtpUrl: string | null
  mailFrom: string
  workDir: string
  ffmpeg: string
  ffprobe: string
}

/** A setting is missing or unsafe; the message is one line that says which. */
export class SettingsError extends Error {
  override name = 'SettingsError'
}

const SAMPLE_SECRETS = /change-?me|secret-?secret|example|standmark-demo|password|^(.)\1+$/i

const WEB = ['http:', 'https:']
const POSTGRES = ['postgres:', 'postgresql:']
const SMTP = ['smtp:', 'smtps:']

type Environment = Readonly<Record<string, string | undefined>>

function need(env: Environment, name: string, meaning: string): string {
  const value = env[name]?.trim()
  if (!value) throw new SettingsError(`${name} is not set: ${meaning}`)
  return value
}

function oneOf<const Words extends readonly [string, ...string[]]>(env: Environment, name: string, words: Words): Words[number] {
  const value = env[name]?.trim()
  if (!value) return words[0]
  const word = words.find(candidate => candidate === value)
  if (!word) throw new SettingsError(`${name} is «${value}»: it must be one of ${words.join(', ')}`)
  return word
}

function readSecret(env: Environment, mode: Settings['mode']): string {
  const secret = need(env, 'STANDMARK_SECRET', 'at least 32 random characters that seal the cookies')
  if (secret.length < 32) throw new SettingsError('STANDMARK_SECRET is shorter than 32 characters')
  if (mode === 'production' && SAMPLE_SECRETS.test(secret)) throw new SettingsError('STANDMARK_SECRET looks like a sample: make a random one, for example with openssl rand -base64 48')
  return secret
}

function readOrigins(env: Environment, mode: Settings['mode']): string[] {
  const origins = need(env, 'STANDMARK_ORIGINS', 'the addresses people open, comma between them, for example https://standmark.example.org')
    .split(',').map(origin => origin.trim().replace(/\/$/, '')).filter(Boolean)
  if (origins.length === 0) throw new SettingsError('STANDMARK_ORIGINS names no address')
  for (const origin of origins) {
    if (!URL.canParse(origin) || new URL(origin).origin !== origin) throw new SettingsError(`STANDMARK_ORIGINS holds «${origin}», which is not an origin`)
    if (mode === 'production' && !origin.startsWith('https://')) throw new SettingsError(`STANDMARK_ORIGINS holds «${origin}»: production needs https`)
  }
  return origins
}

/** An address of one of these schemes; the complaint does not repeat it, for it may hold a password. */
function addressOf(name: string, value: string, schemes: readonly string[]): string {
  if (!URL.canParse(value) || !schemes.includes(new URL(value).protocol)) throw new SettingsError(`${name} is not an address that begins with ${schemes.map(scheme => `${scheme}//`).join(' or ')}`)
  return value
}

function readStorage(env: Environment): Settings['storage'] {
  const endpoint = addressOf('STANDMARK_STORAGE_ENDPOINT', need(env, 'STANDMARK_STORAGE_ENDPOINT', 'the address of the S3-compatible storage'), WEB)
  return {
    endpoint,
    publicEndpoint: addressOf('STANDMARK_STORAGE_PUBLIC_ENDPOINT', env.STANDMARK_STORAGE_PUBLIC_ENDPOINT?.trim() || endpoint, WEB),
    region: env.STANDMARK_STORAGE_REGION?.trim() || 'us-east-1',
    bucket: need(env, 'STANDMARK_STORAGE_BUCKET', 'the bucket for the clips'),
    key: need(env, 'STANDMARK_STORAGE_KEY', 'the access key of the storage'),
    secret: need(env, 'STANDMARK_STORAGE_SECRET', 'the secret key of the storage'),
  }
}

/**
 * Reads the settings.
 * @throws SettingsError with one clear line when one is missing, malformed or unsafe for production.
 */
export function readSettings(env: Environment): Settings {
  const mode = oneOf(env, 'STANDMARK_MODE', ['production', 'demo'])
  const smtpUrl = env.STANDMARK_SMTP_URL?.trim()
  return {
    mode,
    role: oneOf(env, 'STANDMARK_ROLE', ['all', 'web', 'worker']),
    databaseUrl: addressOf('STANDMARK_DATABASE_URL', need(env, 'STANDMARK_DATABASE_URL', 'the PostgreSQL address of the serving role'), POSTGRES),
    secret: readSecret(env, mode),
    origins: readOrigins(env, mode),
    storage: readStorage(env),
    smtpUrl: smtpUrl ? addressOf('STANDMARK_SMTP_URL', smtpUrl, SMTP) : null,
    mailFrom: env.STANDMARK_MAIL_FROM?.trim() || 'Standmark <no-reply@localhost>',
    workDir: env.STANDMARK_WORK_DIR?.trim() || '/tmp/standmark',
    ffmpeg: env.STANDMARK_FFMPEG?.trim() || 'ffmpeg',
    ffprobe: env.STANDMARK_FFPROBE?.trim() || 'ffprobe',
  }
}

let current: Settings | undefined

/** The settings of this process. Read at the first call, which the start-up makes. */
export function settings(): Settings {
  current ??= readSettings(process.env)
  return current
}
