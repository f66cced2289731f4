/**
 * After a step to another page the focus goes to its main region, as a page load would do, so that the keyboard and
 * screen readers go on from there. A step between the tabs of one record leaves the focus on the tab.
 */
export function useFocusOnArrival() {
  const router = useRouter()
  if (import.meta.server) return
  let isDue = false
  const forget = router.afterEach((to, from, failure) => {
    isDue = !failure && from.matched.length > 0 && to.path !== from.path && to.matched[0] !== from.matched[0]
  })
  const unhook = useNuxtApp().hook('page:finish', () => {
    if (isDue) document.getElementById('main')?.focus({ preventScroll: true })
    isDue = false
  })
  onScopeDispose(() => {
    forget()
    unhook()
  })
}
