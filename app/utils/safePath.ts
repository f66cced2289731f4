/**
 * Where to go after signing in. Only a path of this very site is followed; anything else (another host, `//host`,
 * `/\host`, a scheme) leads to the start.
 */
export function safePath(wanted: unknown): string {
  if (typeof wanted !== 'string' || !wanted.startsWith('/') || /[\\\u0000-\u001f]/.test(wanted)) return '/'
  const here = 'http://here.invalid'
  const url = URL.canParse(wanted, here) ? new URL(wanted, here) : null
  if (!url || url.origin !== here || url.pathname.startsWith('//') || url.pathname === '/sign-in') return '/'
  return `${url.pathname}${url.search}${url.hash}`
}
