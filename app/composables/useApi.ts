export interface ApiOptions {
  method?: 'GET' | 'POST' | 'PUT' | 'PATCH' | 'DELETE'
  query?: Record<string, unknown>
  body?: Record<string, unknown>
  /** The version that was read, sent as `If-Match`. */
  version?: number
  /** Sent as `Idempotency-Key`: the same key and body gives the first answer again. */
  idempotencyKey?: string
  signal?: AbortSignal
}

/**
 * The one way to call our server. Passes the cookie on while rendering on the server, and tells the session
 * when it has ended, so that the person can sign in again where they are.
 */
export function useApi() {
  const request = useRequestFetch()
  const session = useSessionStore()
  return async function api<Answer>(path: string, options: ApiOptions = {}): Promise<Answer> {
    const { version, idempotencyKey, ...rest } = options
    const headers: Record<string, string> = {}
    if (version !== undefined) headers['If-Match'] = String(version)
    if (idempotencyKey) headers['Idempotency-Key'] = idempotencyKey
    try {
      return await request<Answer>(path, { ...rest, headers, retry: 0 })
    } catch (error) {
      if (parseApiError(error).code === 'not-signed-in') session.expire()
      throw error
    }
  }
}
