import { promiseTimeout } from '@vueuse/core'

/** How long a step to another page waits for its data before it shows that it is loading. */
const PATIENCE_MS = 400

interface ApiDataOptions {
  query?: MaybeRefOrGetter<Record<string, unknown>>
  /** The page makes no sense without it: a refusal shows the error page with its status. */
  isFatal?: boolean
  /** What is read next depends on it: it is waited for however long it takes. */
  isNeeded?: boolean
  /** The page is shown at once and the data follows. */
  isLazy?: boolean
}

/**
 * Reads one address of ours for a page, again whenever the address or the query changes. Old data stays while new data loads.
 * Await it to have the data in the first answer of the server.
 */
export function useApiData<Answer>(path: MaybeRefOrGetter<string>, options: ApiDataOptions = {}) {
  const api = useApi()
  const query = computed(() => clean(toValue(options.query) ?? {}))
  // A key of this component's own: the next page would else take over what the page before it read, though it may have changed it.
  const id = useId()
  const asyncData = useAsyncData(
    () => `api:${toValue(path)}:${id}`,
    (_app, { signal }) => api<Answer>(toValue(path), { query: query.value, signal }),
    { watch: [query], lazy: options.isLazy ?? false, dedupe: 'cancel' },
  )
  const problem = computed(() => asyncData.error.value ? parseApiError(asyncData.error.value) : null)
  const nuxtApp = useNuxtApp()
  function refuse() {
    const now = problem.value
    if (!options.isFatal || !now || now.code === 'not-signed-in') return
    nuxtApp.runWithContext(() => showError({ statusCode: now.status || 503, data: { code: now.code, requestId: now.requestId } }))
  }
  // While rendering on the server watchers stand still: there the awaited answer is looked at.
  watch(problem, refuse)
  const parts = {
    data: asyncData.data,
    problem,
    isPending: computed(() => asyncData.status.value === 'pending' || asyncData.status.value === 'idle'),
    refresh: () => asyncData.refresh(),
  }
  // Quick data comes with its page, without a flash of grey lines; where it is slow, the page comes first and says so.
  const isStep = import.meta.client && !nuxtApp.isHydrating && !options.isNeeded
  const arrival: Promise<unknown>[] = [Promise.resolve(asyncData), ...(isStep ? [promiseTimeout(PATIENCE_MS)] : [])]
  const ready = Promise.race(arrival).then(() => {
    refuse()
    return parts
  })
  return Object.assign(ready, parts)
}

/** Drops what is not asked for, so that the address stays short. */
function clean(query: Record<string, unknown>): Record<string, unknown> {
  return Object.fromEntries(Object.entries(query).filter(([, value]) => value !== undefined && value !== null && value !== ''))
}
