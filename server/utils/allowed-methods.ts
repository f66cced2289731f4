/** A route of the built server as Nitro lists it: `:name` stands for one segment. */
interface ListedRoute { route?: string, method?: string }

function fits(pattern: readonly string[], segments: readonly string[]): boolean {
  return pattern.length === segments.length && pattern.every((part, index) => part.startsWith(':') || part === segments[index])
}

/**
 * @param path of a request, with or without a query.
 * @returns the methods that this address takes, in capitals; empty when there is nothing at it.
 */
export function allowedMethods(path: string, routes: readonly ListedRoute[]): string[] {
  const segments = (path.split('?')[0] ?? '').replace(/\/$/, '').split('/')
  return routes.flatMap(({ route, method }) => route && method && fits(route.split('/'), segments) ? [method.toUpperCase()] : []).sort()
}
