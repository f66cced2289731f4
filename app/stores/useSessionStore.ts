import { rolesMay } from '#shared/schemas/permissions'
import type { Permission } from '#shared/schemas/permissions'
import type { Me } from '#shared/schemas/account'

/** Who is signed in. The server decides what they may do; this only hides what it would refuse. */
export const useSessionStore = defineStore('session', () => {
  const me = ref<Me | null>(null)
  const isLoaded = ref(false)
  /** The session ended while a page was open; the person is asked to sign in again in place. */
  const isExpired = ref(false)
  const request = useRequestFetch()

  /** Reads who is signed in; nobody is a fine answer, a server that is away is not. */
  async function load() {
    try {
      me.value = await request<Me>('/api/me', { retry: 0 })
    } catch (error) {
      if (parseApiError(error).status !== 401) throw error
      me.value = null
    }
    isLoaded.value = true
  }

  function enter(user: Me) {
    me.value = user
    isLoaded.value = true
    isExpired.value = false
  }

  async function signOut() {
    await request('/api/auth/sign-out', { method: 'POST', retry: 0 })
    me.value = null
    isExpired.value = false
  }

  function expire() {
    if (me.value) isExpired.value = true
  }

  function may(permission: Permission): boolean {
    return me.value !== null && rolesMay(me.value.roles, permission)
  }

  return { me, isLoaded, isExpired, load, enter, signOut, expire, may }
})
