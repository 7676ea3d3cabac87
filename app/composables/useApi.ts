import type { NuxtError } from '#app'
import type { FieldIssue } from '#shared/utils/errors'

/** A failed request in a form that pages can show: every message is written for people by the server. */
export class ApiProblem extends Error {
  constructor(
    /** HTTP status; 0 when the site could not be reached at all. */
    readonly status: number,
    readonly code: string,
    message: string,
    readonly issues: FieldIssue[] = [],
    readonly data: Record<string, unknown> = {},
  ) {
    super(message)
    this.name = 'ApiProblem'
  }
}

const OFFLINE = 'The site cannot be reached just now. Nothing you typed is lost; check the connection and try again.'

/** Any failure as an ApiProblem. */
export function asProblem(error: unknown): ApiProblem {
  if (error instanceof ApiProblem) return error
  const failure = error as { statusCode?: number, status?: number, data?: { data?: Record<string, unknown>, message?: string }, message?: string }
  const status = failure.statusCode ?? failure.status ?? 0
  if (!status) return new ApiProblem(0, 'offline', OFFLINE)
  const data = failure.data?.data ?? {}
  return new ApiProblem(status, String(data.code ?? 'internal'), String(data.message ?? failure.data?.message ?? failure.message ?? 'Something went wrong.'), (data.issues as FieldIssue[]) ?? [], data)
}

interface ApiOptions {
  method?: 'GET' | 'POST' | 'PATCH' | 'PUT' | 'DELETE'
  body?: unknown
  query?: Record<string, unknown>
  headers?: Record<string, string>
  signal?: AbortSignal
}

/**
 * `api<T>('/api/builds')`: carries the visitor's cookie when a page is rendered on the server,
 * and throws ApiProblem for every failure.
 */
export function useApi() {
  const request = useRequestFetch()
  return async function api<T>(path: string, options: ApiOptions = {}): Promise<T> {
    try {
      return await request<T>(path, { retry: 0, ...options } as Parameters<typeof request>[1]) as T
    }
    catch (error) {
      throw asProblem(error)
    }
  }
}

/** Keyed page data from the API; errors are ApiProblems. With `fatal` a failed load ends in the error page and its status. */
export function useApiData<T>(key: string | (() => string), path: () => string, options: { fatal?: boolean, lazy?: boolean, server?: boolean } = {}) {
  const api = useApi()
  const event = useRequestEvent()
  const asked = useAsyncData<T>(key as string, async () => {
    try {
      return await api<T>(path())
    }
    catch (error) {
      const problem = asProblem(error)
      // The page itself says what is wrong; its status says so too.
      if (event) setResponseStatus(event, problem.status || 503)
      throw createError({ statusCode: problem.status || 503, message: problem.message, fatal: options.fatal ?? false, data: { code: problem.code, message: problem.message } })
    }
  }, { lazy: options.lazy, server: options.server })
  return options.fatal ? orErrorPage(asked) : asked
}

interface Answering { error: Ref<NuxtError | undefined> }

/** Nuxt only keeps the error of asked data: the page would be drawn without it, and answer 200. */
function orErrorPage<Asked extends Answering & PromiseLike<Answering>>(asked: Asked): Asked {
  const nuxt = useNuxtApp()
  // The same page for another address: nothing awaits it a second time.
  watch(asked.error, (error) => {
    if (error && import.meta.client) void nuxt.runWithContext(() => showError(error))
  })
  const whole = asked.then((found) => {
    if (found.error.value) throw createError({ ...found.error.value, message: found.error.value.message, fatal: true })
    return found
  })
  // What is asked for carries a `then` of its own, which would pass the error by.
  const { then: _then, catch: _catch, finally: _finally, ...answer } = asked as unknown as Promise<unknown>
  return Object.assign(whole, answer) as unknown as Asked
}
