import type { Problem } from '#shared/schemas/common'
import { problemSchema } from '#shared/schemas/common'

/** A request that failed, with the problem the server answered or the one that explains its silence. */
export class ProblemError extends Error {
  readonly problem: Problem

  constructor(problem: Problem) {
    super(problem.detail || problem.title)
    this.name = 'ProblemError'
    this.problem = problem
  }
}

interface ApiOptions {
  method?: 'GET' | 'POST' | 'PUT' | 'PATCH' | 'DELETE'
  body?: unknown
  query?: Record<string, string | number | boolean | null | undefined | string[]>
  signal?: AbortSignal
}

/** Wrong passwords are answered with 401 too, and say so themselves. */
const ASKS_PASSWORD = ['/api/sign-in', '/api/password']

/**
 * Returns `api(url, options)`: a request to the server that answers the body or throws a {@link ProblemError}.
 * When the session has ended a reading request leads to the sign-in page; a writing one throws, so that what was typed
 * stays, with a link that signs in again in another tab.
 */
export function useApi() {
  const request = useRequestFetch()
  const router = useRouter()
  const session = useSessionStore()

  return async function api<T>(url: string, options: ApiOptions = {}): Promise<T> {
    try {
      return await (request as typeof $fetch)<T>(url, options as object) as T
    }
    catch (error) {
      if ((error as Error).name === 'AbortError') throw error
      const problem = problemOf(error)
      if (problem.status === 401 && !ASKS_PASSWORD.includes(url)) {
        const signIn = `/sign-in?back=${encodeURIComponent(router.currentRoute.value.fullPath)}`
        if ((options.method ?? 'GET') === 'GET') {
          session.me = null
          await router.push(signIn)
        }
        throw new ProblemError({
          ...problem,
          title: 'You are not signed in any more.',
          detail: 'What you typed is still here. Sign in again in another tab, then come back and try again.',
          see: signIn,
        })
      }
      throw new ProblemError(problem)
    }
  }
}

/** The problem in a failed request: as the server described it, or in words of our own when it did not. */
export function problemOf(error: unknown): Problem {
  const failed = error as { data?: unknown, statusCode?: number, response?: unknown }
  const described = problemSchema.safeParse(failed.data)
  if (described.success) return described.data
  if (!failed.response && !failed.statusCode) {
    return {
      type: 'about:blank',
      title: 'The server could not be reached.',
      status: 0,
      detail: 'What you typed is still here; try again.',
    }
  }
  return {
    type: 'about:blank',
    title: 'The server could not answer.',
    status: failed.statusCode ?? 500,
    detail: 'What you typed is still here; try again. If it happens again, tell whoever runs this server.',
  }
}
