import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { z } from 'zod'
import { ApiError, get, getAll, onSessionEnd, patch, post } from './client'
import { noteRenewal } from './refresh'

const thing = z.object({ name: z.string() })
const json = (body: unknown, status = 200, headers: Record<string, string> = {}) =>
  new Response(JSON.stringify(body), { status, headers: { 'Content-Type': 'application/json', ...headers } })
const problem = (status: number, code: string, more: object = {}) =>
  json({ type: 'about:blank', title: code, status, code, ...more }, status, { 'X-Request-Id': 'r-1' })

type Answer = (path: string, init: RequestInit) => Response | Promise<Response>
const calls: { path: string; init: RequestInit }[] = []
function api(answer: Answer) {
  vi.stubGlobal(
    'fetch',
    vi.fn((path: string, init: RequestInit) => {
      calls.push({ path, init })
      return Promise.resolve(answer(path, init))
    }),
  )
}
const refusal = async (request: Promise<unknown>): Promise<ApiError> => {
  const error: unknown = await request.then(
    () => undefined,
    (reason: unknown) => reason,
  )
  if (!(error instanceof ApiError)) throw new Error(`expected an ApiError, got ${String(error)}`)
  return error
}
const headersOf = (at: number) => calls[at]?.init.headers as Record<string, string>

beforeEach(() => {
  calls.length = 0
  localStorage.clear()
})
afterEach(() => vi.unstubAllGlobals())

describe('a request', () => {
  it('is parsed by the schema, which drops what it does not know', async () => {
    api(() => json({ name: 'barley', other: 1 }))
    expect(await get('/x', thing)).toEqual({ name: 'barley' })
    expect(calls[0]?.path).toBe('/api/v1/x')
  })

  it('sends version and key as headers', async () => {
    api(() => json({ name: 'barley' }))
    await patch('/x', thing, { name: 'b' }, 7)
    await post('/y', thing, {}, { idempotencyKey: 'k' })
    expect(headersOf(0)['If-Match']).toBe('"7"')
    expect(headersOf(1)['Idempotency-Key']).toBe('k')
  })

  it('leaves out what is undefined in the query', async () => {
    api(() => json({ name: 'barley' }))
    await get('/x', thing, { query: { asOf: undefined, limit: 5 } })
    expect(calls[0]?.path).toBe('/api/v1/x?limit=5')
  })

  it('follows the cursor to the last page', async () => {
    api((path) =>
      path.includes('cursor=2')
        ? json({ items: [{ name: 'b' }] })
        : json({ items: [{ name: 'a' }], nextCursor: '2' }),
    )
    expect(await getAll('/x', thing)).toEqual([{ name: 'a' }, { name: 'b' }])
  })
})

describe('a refusal', () => {
  it('carries code, fields, request id and the current thing', async () => {
    api(() =>
      problem(409, 'stale_version', {
        current: { version: 3 },
        errors: [{ path: 'name', code: 'required', message: 'needed' }],
      }),
    )
    const error = await refusal(patch('/x', thing, {}, 1))
    expect(error.code).toBe('stale_version')
    expect(error.details.requestId).toBe('r-1')
    expect(error.details.current).toEqual({ version: 3 })
    expect(error.fieldProblem('name')?.code).toBe('required')
    expect(error.isPassing).toBe(false)
  })

  it('says when to come back', async () => {
    api(() => json({ type: 'x', title: 'x', status: 503, code: 'busy' }, 503, { 'Retry-After': '2' }))
    const error = await refusal(get('/x', thing))
    expect(error.details.retryAfter).toBe(2)
    expect(error.isPassing).toBe(true)
  })

  it.each([
    ['a proxy without the API', () => new Response('Bad gateway', { status: 502 }), 'unreachable'],
    ['an answer of another shape', () => json({ nom: 1 }), 'unreadable_answer'],
    ['a page instead of JSON', () => new Response('<html>', { status: 200 }), 'unreadable_answer'],
  ])('%s', async (_name, answer, code) => {
    api(answer)
    expect((await refusal(get('/x', thing))).code).toBe(code)
  })

  it('tells a silent server from a lost connection', async () => {
    vi.stubGlobal('fetch', () => Promise.reject(new TypeError('failed')))
    expect((await refusal(get('/x', thing))).code).toBe('unreachable')
    vi.spyOn(navigator, 'onLine', 'get').mockReturnValue(false)
    expect((await refusal(get('/x', thing))).code).toBe('offline')
    vi.restoreAllMocks()
  })
})

describe('a session that ran out', () => {
  /** An API whose access token is refused until it has been renewed. */
  function withTokens(refresh: () => Response) {
    let fresh = false
    api((path) => {
      if (path.endsWith('/auth/refresh')) {
        const answer = refresh()
        fresh = answer.ok
        return answer
      }
      return fresh ? json({ name: 'barley' }) : problem(401, 'not_signed_in')
    })
  }
  const renewals = () => calls.filter(({ path }) => path.endsWith('/auth/refresh')).length

  it('is renewed once for all who wait', async () => {
    withTokens(() => json({}))
    const answers = await Promise.all([get('/a', thing), get('/b', thing), get('/c', thing)])
    expect(answers).toHaveLength(3)
    expect(renewals()).toBe(1)
  })

  it('is not renewed again where another tab has done so meanwhile', async () => {
    let asked = 0
    api((path) => {
      if (path.endsWith('/auth/refresh')) return json({})
      asked += 1
      if (asked > 1) return json({ name: 'barley' })
      localStorage.setItem('maslin.renewedAt', String(Date.now() + 5))
      return problem(401, 'not_signed_in')
    })
    await get('/a', thing)
    expect(renewals()).toBe(0)
  })

  it('takes its turn among the tabs where the browser has locks', async () => {
    const request = vi.fn((_name: string, work: () => unknown) => Promise.resolve(work()))
    vi.stubGlobal('navigator', { onLine: true, locks: { request } })
    withTokens(() => json({}))
    await get('/a', thing)
    expect(request).toHaveBeenCalledOnce()
  })

  it('is over where the renewal is refused, and everybody is told', async () => {
    withTokens(() => problem(401, 'session_ended'))
    const ended = vi.fn()
    const stop = onSessionEnd(ended)
    expect((await refusal(get('/a', thing))).code).toBe('not_signed_in')
    expect(ended).toHaveBeenCalledOnce()
    stop()
  })

  it('is not over because the server is down', async () => {
    withTokens(() => problem(503, 'not_ready'))
    const ended = vi.fn()
    const stop = onSessionEnd(ended)
    expect((await refusal(get('/a', thing))).code).toBe('unreachable')
    expect(ended).not.toHaveBeenCalled()
    stop()
  })

  it('is renewed before it is refused', async () => {
    vi.useFakeTimers({ now: new Date('2026-11-24T08:00:00Z') })
    noteRenewal()
    withTokens(() => json({}))
    vi.setSystemTime(new Date('2026-11-24T08:09:30Z'))
    await get('/a', thing)
    expect(calls.map(({ path }) => path)).toEqual(['/api/v1/auth/refresh', '/api/v1/a'])
    vi.useRealTimers()
  })

  it('is no matter of renewal when a password is wrong', async () => {
    api(() => problem(401, 'wrong_sign_in'))
    expect((await refusal(post('/auth/sign-in', thing, {}))).code).toBe('wrong_sign_in')
    expect(calls).toHaveLength(1)
  })
})
