import { STATUS_CODES } from 'node:http'
import { createError, setResponseHeader, type H3Error, type H3Event } from 'h3'
import { logger } from '#server/adapters/logger'
import { AppError, isDatabaseAway } from '#server/services/app-error'

function toAppError(error: unknown): AppError {
  if (error instanceof AppError) return error
  if (isDatabaseAway(error)) return new AppError('database-unavailable', { retryAfterSeconds: 5, cause: error })
  return new AppError('internal', { cause: error })
}

/** The error JSON of the interface. What is not an AppError is logged with its request id, and its details never leave. */
export function toApiError(event: H3Event, error: unknown): H3Error {
  const appError = toAppError(error)
  const { requestId } = event.context
  if (appError.statusCode >= 500) logger.error({ requestId, code: appError.code, err: appError.details.cause ?? appError }, 'request failed')
  const { issues, current, retryAfterSeconds, headers } = appError.details
  if (retryAfterSeconds !== undefined) setResponseHeader(event, 'Retry-After', retryAfterSeconds)
  for (const [name, value] of Object.entries(headers ?? {})) setResponseHeader(event, name, value)
  return createError({
    statusCode: appError.statusCode,
    statusMessage: STATUS_CODES[appError.statusCode] ?? 'Error',
    message: appError.message,
    data: { code: appError.code, requestId, ...(issues ? { issues } : {}), ...(current !== undefined ? { current } : {}) },
  })
}
