import { setTimeout as sleep } from 'node:timers/promises'

/** How often a request is repeated that the server could not take just now (429, 503, or no connection). */
const ATTEMPTS = 6

/**
 * Signs someone in over the HTTP interface.
 * @returns `get(path)` and `post(path, body)`, which give the answer's body and throw on anything but success.
 */
export async function signIn(baseUrl, email, password) {
  let cookie = ''
  const call = async (method, path, body) => {
    for (let attempt = 1; ; attempt++) {
      const response = await send(baseUrl + path, method, body, cookie).catch(error => error)
      const isBusy = response instanceof Error || response.status === 429 || response.status === 503
      if (isBusy && attempt < ATTEMPTS) {
        await sleep(300 * attempt)
        continue
      }
      if (response instanceof Error) throw new Error(`${method} ${path}: no answer`, { cause: response })
      for (const line of response.headers.getSetCookie()) cookie = line.split(';')[0]
      const text = await response.text()
      if (!response.ok) throw new Error(`${method} ${path} as ${email}: ${response.status} ${text.slice(0, 500)}`)
      return text ? JSON.parse(text) : null
    }
  }
  await call('POST', '/api/auth/sign-in', { email, password })
  return { get: path => call('GET', path), post: (path, body) => call('POST', path, body) }
}

function send(url, method, body, cookie) {
  return fetch(url, {
    method,
    headers: { accept: 'application/json', ...(cookie ? { cookie } : {}), ...(body === undefined ? {} : { 'content-type': 'application/json' }) },
    ...(body === undefined ? {} : { body: JSON.stringify(body) }),
    signal: AbortSignal.timeout(60_000),
  })
}
