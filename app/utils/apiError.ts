import { ApiErrorSchema } from '#shared/schemas/error'

export interface ApiIssue { path: string, message: string }

/** What went wrong with a call, for the interface to switch on: never on text. */
export interface ApiProblem {
  /** HTTP status; 0 when no answer came. */
  status: number
  /** The stable word of the server; `network` when no answer came, `internal` when the answer was not one of ours. */
  code: string
  issues: ApiIssue[]
  requestId: string | null
  /** Seconds to wait, from `Retry-After`. */
  retryAfter: number | null
  /** Only with 412: the state that is kept now. */
  current: unknown
}

/** Turns whatever a call threw into a problem. Aborted calls give the code `aborted`. */
export function parseApiError(error: unknown): ApiProblem {
  const problem: ApiProblem = { status: statusOf(error), code: 'internal', issues: [], requestId: null, retryAfter: retryAfterOf(error), current: undefined }
  const body = ApiErrorSchema.safeParse(property(error, 'data'))
  if (body.success) {
    const { code, requestId, issues, current } = body.data.data
    return { ...problem, status: body.data.statusCode, code, requestId, issues: issues ?? [], current }
  }
  if (problem.status === 0) return { ...problem, code: isAbort(error) ? 'aborted' : 'network' }
  if (problem.status === 404) return { ...problem, code: 'not-found' }
  return problem
}

function property(holder: unknown, name: string): unknown {
  if (typeof holder !== 'object' || holder === null || !(name in holder)) return undefined
  return Reflect.get(holder, name)
}

function statusOf(error: unknown): number {
  const status = property(error, 'statusCode') ?? property(property(error, 'response'), 'status')
  return typeof status === 'number' ? status : 0
}

function isAbort(error: unknown): boolean {
  return property(error, 'name') === 'AbortError' || property(property(error, 'cause'), 'name') === 'AbortError'
}

function retryAfterOf(error: unknown): number | null {
  const headers = property(property(error, 'response'), 'headers')
  const seconds = headers instanceof Headers ? Number(headers.get('retry-after') ?? Number.NaN) : Number.NaN
  return Number.isFinite(seconds) && seconds > 0 ? seconds : null
}
