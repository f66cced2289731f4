import type { Permission } from '#shared/schemas/permissions'

declare module 'vue-router' {
  interface RouteMeta {
    /** Hides the page from roles that the server would refuse anyway. */
    permission?: Permission
  }
}

/** For comfort only, the server decides: nobody signed in is led to the sign-in page and back afterwards. */
export default defineNuxtRouteMiddleware(async (to) => {
  const session = useSessionStore()
  // The server has decided already for the page that the browser takes over, the error page among them.
  if (import.meta.client && useNuxtApp().isHydrating) return
  if (!session.isLoaded) {
    try {
      await session.load()
    } catch (error) {
      const problem = parseApiError(error)
      return abortNavigation({ statusCode: problem.status || 503, data: { code: problem.code, requestId: problem.requestId } })
    }
  }
  const isSignedIn = session.me !== null && !session.isExpired
  if (to.path === '/sign-in') return isSignedIn ? navigateTo(safePath(to.query.next)) : undefined
  if (session.me === null) return navigateTo({ path: '/sign-in', query: to.fullPath === '/' ? {} : { next: to.fullPath } })
  if (to.meta.permission && !session.may(to.meta.permission)) return abortNavigation({ statusCode: 403, data: { code: 'not-allowed' } })
})
