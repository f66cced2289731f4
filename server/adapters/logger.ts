import { pino } from 'pino'

/** JSON lines on standard output. Never log names, dates of birth, addresses, tokens or presigned addresses. */
export const logger = pino({
  level: process.env.STANDMARK_LOG_LEVEL ?? 'info',
  base: { role: process.env.STANDMARK_ROLE ?? 'all' },
  timestamp: pino.stdTimeFunctions.isoTime,
  redact: ['password', 'token', 'cookie', 'authorization', '*.password', '*.token'],
})
