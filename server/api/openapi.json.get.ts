import { handlers } from '#nitro-internal-virtual/server-handlers'
import { z } from 'zod'

type Described = DescribedRoute['definition']

function definitionOf(module: unknown): Described | null {
  const handler: unknown = module && typeof module === 'object' ? Reflect.get(module, 'default') : null
  return handler && typeof handler === 'function' && 'apiDefinition' in handler ? handler.apiDefinition as Described : null // set by defineApiHandler alone
}

async function listRoutes(): Promise<DescribedRoute[]> {
  const routes = await Promise.all(handlers.map(async ({ route, method, handler, lazy }) => {
    if (!route?.startsWith('/api/') || !method || !lazy) return null
    const definition = definitionOf(await handler())
    return definition ? { path: route, method, definition } : null
  }))
  return routes.filter(route => route !== null)
}

/** GET /api/openapi.json. The whole interface, generated from the schemas that validate the requests. */
export default defineApiHandler({ can: 'public', response: z.record(z.string(), z.unknown()) }, async () => describeInterface(await listRoutes(), sessionCookieName()))
