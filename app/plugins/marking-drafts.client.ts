/** Whoever signs out, or signs in after someone else, leaves and finds no drafts of markings. */
export default defineNuxtPlugin(() => {
  const session = useSessionStore()
  const store = useMarkingStore()
  // Until it is known who is there (a server that is away says nothing about it) drafts stay.
  watch(() => session.isLoaded ? session.me?.id ?? 'nobody' : null, (now, before) => {
    if (now === null) return
    clearMarkingDrafts(now)
    if (before && before !== now) store.forget()
  }, { immediate: true, flush: 'sync' })
})
