/** Uploads go on wherever one is in the application; whoever signs out leaves none. */
export default defineNuxtPlugin(() => {
  const session = useSessionStore()
  const uploads = useUploadStore()
  // A session that ran out keeps its uploads for the same person; until it is known who is there nothing happens.
  watch(() => session.isLoaded ? session.me?.id ?? null : undefined, (now, before) => {
    if (before && !now) uploads.leave()
  }, { flush: 'sync' })
  useEventListener(window, 'beforeunload', (event: BeforeUnloadEvent) => {
    if (uploads.isLeavingAny) event.preventDefault()
  })
})
