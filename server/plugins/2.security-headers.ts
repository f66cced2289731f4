import { settings } from '#server/adapters/settings'

/** What depends on where the server is started, and not on where it was built: the storage's address, https. */
export default defineNitroPlugin(async (nitroApp) => {
  nitroApp.hooks.hook('nuxt-security:routeRules', (rules) => {
    const headers = rules['/**']?.headers
    if (!headers || typeof headers.contentSecurityPolicy !== 'object') throw new Error('The security headers are not configured')
    const { storage, mode } = settings()
    headers.contentSecurityPolicy['connect-src'] = ['\'self\'', new URL(storage.publicEndpoint).origin]
    headers.contentSecurityPolicy['upgrade-insecure-requests'] = mode === 'production'
    if (mode === 'demo') headers.strictTransportSecurity = false
  })
  // The module's own plugin runs before this one and has called the hook already: once more, now that we listen.
  await nitroApp.hooks.callHook('nuxt-security:ready')
})
