import type { RouteLocationRaw } from 'vue-router'

/** Leaving with marks that the server does not have asks first, in the page and in the browser. */
export function useMarkingLeave(stillIds: Ref<readonly string[]>) {
  const store = useMarkingStore()
  const router = useRouter()
  const isAsking = ref(false)
  const wanted = shallowRef<RouteLocationRaw | null>(null)
  let mayGo = false
  const unsaved = () => store.dirtyIds().filter(id => stillIds.value.includes(id))

  onBeforeRouteLeave((to) => {
    if (mayGo || unsaved().length === 0) return true
    wanted.value = to.fullPath
    isAsking.value = true
    return false
  })
  useEventListener('beforeunload', (event: BeforeUnloadEvent) => {
    if (unsaved().length > 0) event.preventDefault()
  })

  /** The draft stays in this tab; the bench finds it again. */
  async function go() {
    isAsking.value = false
    mayGo = true
    if (wanted.value) await router.push(wanted.value)
  }

  return { isAsking, go, count: computed(() => isAsking.value ? unsaved().length : 0) }
}
