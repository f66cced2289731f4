import { defineEventHandler, getRequestHeader } from 'h3'
import { AppError } from '#server/services/app-error'

const SAFE_METHODS = new Set(['GET', 'HEAD', 'OPTIONS'])

function isSameOrigin(fetchSite: string | undefined, origin: string | undefined, host: string | undefined): boolean {
  if (fetchSite !== undefined) return fetchSite === 'same-origin' || fetchSite === 'none'
  if (origin === undefined) return true // no browser: such a client has no cookie that a foreign page could use
  return URL.canParse(origin) && new URL(origin).host === host
}

/** A page of another origin may not change anything with a person's cookie: `Sec-Fetch-Site`, else `Origin` against `Host`. */
export default defineEventHandler((event) => {
  if (SAFE_METHODS.has(event.method)) return
  if (isSameOrigin(getRequestHeader(event, 'sec-fetch-site'), getRequestHeader(event, 'origin'), getRequestHeader(event, 'host'))) return
  throw toApiError(event, new AppError('cross-origin'))
})
