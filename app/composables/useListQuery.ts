interface ListQueryOptions { defaultSort: string, pageSize?: number }

/** Search, sort and page of a list, kept in the address, so that a list can be sent, reloaded and come back to. */
export function useListQuery({ defaultSort, pageSize = 25 }: ListQueryOptions) {
  const route = useRoute()
  const router = useRouter()
  const read = (name: string) => {
    const value = route.query[name]
    return typeof value === 'string' ? value : ''
  }
  const search = computed(() => read('search'))
  const sort = computed(() => read('sort') || defaultSort)
  const page = computed(() => Math.max(1, Math.floor(Number(read('page'))) || 1))
  const query = computed(() => ({ search: search.value, sort: sort.value, page: page.value, pageSize }))

  function set(change: { search?: string, sort?: string, page?: number }) {
    // Another search or order starts at the first page.
    const next = { ...route.query, page: undefined, ...change }
    const kept = Object.entries(next).filter(([name, value]) => value && !(name === 'page' && value === 1) && !(name === 'sort' && value === defaultSort))
    return router.replace({ query: Object.fromEntries(kept.map(([name, value]) => [name, String(value)])) })
  }

  return { search, sort, page, pageSize, query, set }
}
