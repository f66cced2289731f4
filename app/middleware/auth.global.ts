import type { Permission } from '#shared/schemas/permissions'

declare module 'vue-router' {
  interface RouteMeta {
    /** Hides the page from roles that the server would refuse anyway. */
    permission?: Permission
  }
}

/** @returns the error page's problem when it cannot be known who is signed in, or null. */
async function loadSession() {
  try {
    await useSessionStore().load()
    return null
  } catch (error) {
    const { status, code, requestId } = parseApiError(error)
    return { statusCode: status || 503, data: { code, requestId } }
  }
}

/** For comfort only, the server decides: nobody signed in is led to the sign-in page and back afterwards. */
export default defineNuxtRouteMiddleware(async (to) => {
  const session = useSessionStore()
  // The server has decided already for the page that the browser takes over, the error page among them.
  if (import.meta.client && useNuxtApp().isHydrating) return
  const problem = session.isLoaded ? null : await loadSession()
  if (problem) return abortNavigation(problem)
  const isSignedIn = session.me !== null && !session.isExpired
  if (to.path === '/sign-in') return isSignedIn ? navigateTo(safePath(to.query.next)) : undefined
  if (session.me === null) return navigateTo({ path: '/sign-in', query: to.fullPath === '/' ? {} : { next: to.fullPath } })
  if (to.meta.permission && !session.may(to.meta.permission)) return abortNavigation({ statusCode: 403, data: { code: 'not-allowed' } })
})
