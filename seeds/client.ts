import type { Problem } from '../shared/schemas/common'

export interface Answer<T = unknown> {
  status: number
  body: T
  headers: Headers
}

export interface Client {
  /** Sends JSON and reads the answer, whatever its status. */
  send: <T = unknown>(method: string, path: string, body?: unknown) => Promise<Answer<T>>
  /** The same, but anything other than success is an error that says what the server said. */
  must: <T = unknown>(method: string, path: string, body?: unknown) => Promise<T>
  /** Uploads a file as the one part of a form. */
  upload: <T = unknown>(path: string, fileName: string, bytes: BlobPart) => Promise<Answer<T>>
  cookie: () => string
  /** The headers that tell who asks, for requests that are sent another way. */
  credentials: () => Record<string, string>
}

/**
 * A client of /api that keeps its session cookie, as a browser would, or sends a token, as a program does.
 * @param baseUrl the address of the server, without a slash at its end
 */
export function makeClient(baseUrl: string, cookie = '', token = ''): Client {
  let held = cookie
  const credentials = () => ({
    ...(held ? { cookie: held } : {}),
    ...(token ? { authorization: `Bearer ${token}` } : {}),
  })
  const ask = async <T>(method: string, path: string, init: RequestInit): Promise<Answer<T>> => {
    // After seconds of computing, fetch has not yet noticed which idle connections the server closed in the meantime.
    await new Promise(resolve => setTimeout(resolve, 5))
    const headers = new Headers(init.headers)
    for (const [name, value] of Object.entries(credentials())) headers.set(name, value)
    const response = await fetch(baseUrl + path, { ...init, method, headers, redirect: 'manual' })
    for (const set of response.headers.getSetCookie()) held = set.split(';')[0]!
    const text = await response.text()
    const json = /json/.test(response.headers.get('content-type') ?? '')
    return { status: response.status, body: (json && text ? JSON.parse(text) : text) as T, headers: response.headers }
  }
  const send = <T>(method: string, path: string, body?: unknown) => ask<T>(method, path, body === undefined
    ? {}
    : { body: JSON.stringify(body), headers: { 'content-type': 'application/json' } })
  return {
    send,
    must: async <T>(method: string, path: string, body?: unknown) => {
      const answer = await send<T>(method, path, body)
      if (answer.status < 300) return answer.body
      const said = (answer.body as Problem).detail ?? answer.body
      throw new Error(`${method} ${path} answered ${answer.status}: ${said}`)
    },
    upload: <T>(path: string, fileName: string, bytes: BlobPart) => {
      const form = new FormData()
      form.append('file', new Blob([bytes]), fileName)
      return ask<T>('POST', path, { body: form })
    },
    cookie: () => held,
    credentials,
  }
}

/** Asks again and again until the answer is one that counts. */
export async function waitFor<T>(
  what: string,
  ask: () => Promise<T | null | undefined | false>,
  timeoutMs = 60_000,
): Promise<T> {
  const end = Date.now() + timeoutMs
  while (Date.now() < end) {
    const found = await ask()
    if (found) return found
    await new Promise(resolve => setTimeout(resolve, 200))
  }
  throw new Error(`${what} did not come within ${timeoutMs / 1000} s`)
}
