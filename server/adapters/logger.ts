import { pino } from 'pino'

interface SafeError { type: string, code?: string, constraint?: string, message: string, stack: string[], cause?: SafeError }

function textOf(error: Error, name: string): string | undefined {
  const value: unknown = Reflect.get(error, name)
  return typeof value === 'string' ? value : undefined
}

/**
 * What may be written of an error. Texts of database errors quote the values they were given, and those can be
 * names: only code, constraint and the places in the code are kept of them.
 */
export function toSafeError(error: unknown): SafeError {
  if (!(error instanceof Error)) return { type: typeof error, message: 'not an Error', stack: [] }
  const isOfDatabase = textOf(error, 'severity') !== undefined || textOf(error, 'query') !== undefined
  const code = textOf(error, 'code')
  const constraint = textOf(error, 'constraint')
  return {
    type: error.name,
    ...(code ? { code } : {}),
    ...(constraint ? { constraint } : {}),
    message: isOfDatabase ? `database: ${textOf(error, 'routine') ?? 'query failed'}` : error.message.slice(0, 300),
    stack: (error.stack ?? '').split('\n').filter(line => line.startsWith('    at ')).slice(0, 12).map(line => line.trim()),
    ...(error.cause === undefined ? {} : { cause: toSafeError(error.cause) }),
  }
}

/** JSON lines on standard output. Never log names, dates of birth, addresses, tokens or presigned addresses. */
export const logger = pino({
  level: process.env.STANDMARK_LOG_LEVEL ?? 'info',
  base: { role: process.env.STANDMARK_ROLE ?? 'all' },
  timestamp: pino.stdTimeFunctions.isoTime,
  serializers: { err: toSafeError },
  redact: ['password', 'token', 'cookie', 'authorization', '*.password', '*.token'],
})
