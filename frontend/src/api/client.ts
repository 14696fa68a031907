import { pageOf, problemSchema, type FieldProblem, type ProblemCode } from '@maslin/shared'
import { today } from '../composables/today'
import type { z } from 'zod'
import { isRenewalDue, refreshSession } from './refresh'

/** Failures that never reached the API, or came back in no shape we know. */
export type LocalProblemCode = 'offline' | 'unreachable' | 'unreadable_answer'

/** Any failed request. Pages translate by `code` (`problems.*` in the catalogue). */
export class ApiError extends Error {
  constructor(
    readonly code: ProblemCode | LocalProblemCode | (string & {}),
    readonly status: number,
    readonly details: {
      readonly detail?: string | undefined
      /** What is wrong with single fields of the request, by path. */
      readonly fields?: readonly FieldProblem[] | undefined
      readonly requestId?: string | undefined
      /** With `stale_version`: the thing as it stands now. */
      readonly current?: unknown
      /** Seconds after which the server wants to be asked again. */
      readonly retryAfter?: number | undefined
    } = {},
  ) {
    super(code)
    this.name = 'ApiError'
  }

  /** True where asking again later may help. */
  get isPassing(): boolean {
    return this.status >= 500 || this.code === 'unreachable' || this.code === 'offline'
  }

  fieldProblem(path: string): FieldProblem | undefined {
    return this.details.fields?.find((field) => field.path === path)
  }
}

export interface RequestOptions {
  readonly body?: unknown
  /** Version of the thing to change, sent as `If-Match`. */
  readonly version?: number
  readonly idempotencyKey?: string
  readonly query?: Readonly<Record<string, string | number | undefined>>
  readonly signal?: AbortSignal
}

type Method = 'GET' | 'POST' | 'PATCH' | 'PUT' | 'DELETE'

const BASE = '/api/v1'
/** Paths whose 401 is an answer, not a session to renew. */
const NOT_RENEWED = ['/auth/sign-in', '/auth/sign-up', '/auth/refresh', '/auth/sign-out']

const endListeners = new Set<() => void>()

/** Calls `listener` when the session has ended for good, so that the page can ask to sign in again. */
export function onSessionEnd(listener: () => void): () => void {
  endListeners.add(listener)
  return () => endListeners.delete(listener)
}

function urlOf(path: string, query: RequestOptions['query']): string {
  const search = new URLSearchParams()
  for (const [name, value] of Object.entries(query ?? {})) {
    if (value !== undefined) search.set(name, String(value))
  }
  const text = search.toString()
  return text ? `${BASE}${path}?${text}` : BASE + path
}

async function send(method: Method, path: string, options: RequestOptions): Promise<Response> {
  // What is dated today must hold today, whatever day it is where the server stands.
  const headers: Record<string, string> = { Accept: 'application/json', 'Client-Day': today() }
  if (options.body !== undefined) headers['Content-Type'] = 'application/json'
  if (options.version !== undefined) headers['If-Match'] = `"${options.version}"`
  if (options.idempotencyKey !== undefined) headers['Idempotency-Key'] = options.idempotencyKey
  try {
    return await fetch(urlOf(path, options.query), {
      method,
      headers,
      credentials: 'same-origin',
      ...(options.body === undefined ? {} : { body: JSON.stringify(options.body) }),
      ...(options.signal ? { signal: options.signal } : {}),
    })
  } catch (cause) {
    if (options.signal?.aborted) throw cause
    throw new ApiError(navigator.onLine ? 'unreachable' : 'offline', 0)
  }
}

async function problemOf(response: Response): Promise<ApiError> {
  const retryAfter = Number(response.headers.get('Retry-After') ?? undefined)
  const requestId = response.headers.get('X-Request-Id') ?? undefined
  const later = Number.isFinite(retryAfter) ? { retryAfter } : {}
  const parsed = problemSchema.safeParse(await response.json().catch(() => undefined))
  if (!parsed.success) {
    const code = response.status >= 500 ? 'unreachable' : 'unreadable_answer'
    return new ApiError(code, response.status, { requestId, ...later })
  }
  const { code, status, detail, errors, current } = parsed.data
  return new ApiError(code, status, {
    detail,
    fields: errors,
    requestId: parsed.data.requestId ?? requestId,
    current,
    ...later,
  })
}

const renewSession = (since: number): Promise<boolean> =>
  refreshSession(since).catch(() => {
    throw new ApiError(navigator.onLine ? 'unreachable' : 'offline', 0)
  })

/**
 * Sends one request and returns the raw answer. A session that ran out is renewed once, by one request for all that
 * wait for it, and the request is sent again.
 * @throws {ApiError} for every failure but an abort by `options.signal`
 */
async function exchange(method: Method, path: string, options: RequestOptions): Promise<Response> {
  const sentAt = Date.now()
  const renewable = !NOT_RENEWED.includes(path)
  if (renewable && isRenewalDue(sentAt)) await renewSession(sentAt)
  let response = await send(method, path, options)
  if (response.status === 401 && renewable) {
    if (await renewSession(sentAt)) response = await send(method, path, options)
    if (response.status === 401) for (const listener of endListeners) listener()
  }
  if (!response.ok) throw await problemOf(response)
  return response
}

/**
 * A request whose answer is checked by the schema the API answers by.
 * @throws {ApiError} `unreadable_answer` where the answer is not of that shape
 */
export async function request<S extends z.ZodType>(
  method: Method,
  path: string,
  schema: S,
  options: RequestOptions = {},
): Promise<z.output<S>> {
  const response = await exchange(method, path, options)
  const parsed = schema.safeParse(await response.json().catch(() => undefined))
  if (parsed.success) return parsed.data
  throw new ApiError('unreadable_answer', response.status, {
    detail: parsed.error.issues[0]?.path.join('.'),
    requestId: response.headers.get('X-Request-Id') ?? undefined,
  })
}

/** A request whose answer has no body (204), or none that matters. */
export async function requestNothing(
  method: Method,
  path: string,
  options: RequestOptions = {},
): Promise<void> {
  await exchange(method, path, options)
}

export const get = <S extends z.ZodType>(path: string, schema: S, options?: RequestOptions) =>
  request('GET', path, schema, options)
/** Every item of a cursor-paged list, page after page. */
export async function getAll<S extends z.ZodType>(
  path: string,
  item: S,
  query: RequestOptions['query'] = {},
): Promise<z.output<S>[]> {
  const page = pageOf(item)
  const items: z.output<S>[] = []
  let cursor: string | undefined
  do {
    const answer: { items: z.output<S>[]; nextCursor?: string } = await get(path, page, {
      query: { ...query, cursor },
    })
    items.push(...answer.items)
    cursor = answer.nextCursor
  } while (cursor)
  return items
}
export const post = <S extends z.ZodType>(path: string, schema: S, body: unknown, options?: RequestOptions) =>
  request('POST', path, schema, { ...options, body })
export const patch = <S extends z.ZodType>(
  path: string,
  schema: S,
  body: unknown,
  version: number,
  options?: RequestOptions,
) => request('PATCH', path, schema, { ...options, body, version })
export const put = <S extends z.ZodType>(
  path: string,
  schema: S,
  body: unknown,
  version: number,
  options?: RequestOptions,
) => request('PUT', path, schema, { ...options, body, version })
export const remove = (path: string, version: number, options?: RequestOptions) =>
  requestNothing('DELETE', path, { ...options, version })
