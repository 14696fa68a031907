import { dateSchema, idSchema, may, type Action, type Role } from '@maslin/shared'
import { Router, type Request, type RequestHandler, type Response } from 'express'
import { signedInFrom } from '../auth/signedIn'
import { AppError, notFound } from '../errors'
import { jsonBody } from '../middleware/jsonBody'
import { readInput } from '../middleware/fieldProblems'
import { attemptLimit } from '../middleware/attemptLimit'
import { requestIdOf } from '../middleware/requestContext'
import { inFarm } from '../repositories/inFarm'
import { accounts } from '../repositories/accounts'
import { today } from '../services/changes'
import type { Call, Route, Services } from './route'

/** Makes every route answer, each step in the same order: who, whether they may, the path, the version, the body. */
export function registerRoutes(routes: readonly Route[], services: Services): Router {
  const router = Router({ caseSensitive: true, strict: true })
  for (const route of routes) {
    router[route.method](route.path, ...stepsOf(route, services))
  }
  for (const path of new Set(routes.map((route) => route.path))) {
    const methods = routes.filter((route) => route.path === path).map((route) => route.method.toUpperCase())
    router.all(path, refuseMethod([...methods, ...(methods.includes('GET') ? ['HEAD'] : [])].join(', ')))
  }
  return router
}

function stepsOf(route: Route, services: Services): RequestHandler[] {
  const steps: RequestHandler[] = []
  if (route.attemptsPerQuarterHour && services.config.rateLimits) {
    steps.push(attemptLimit(route.attemptsPerQuarterHour))
  }
  if (route.access !== 'public') steps.push(requireSignIn)
  if (isFarmAction(route.access)) steps.push(requireMember(services), requirePermission(route.access))
  steps.push(requirePathIds(route))
  if (route.current) steps.push(requireVersion)
  if (route.needsIdempotencyKey) steps.push(requireIdempotencyKey)
  if (route.body) steps.push(...jsonBody(route.bodyLimit))
  steps.push(answer(route, services))
  return steps
}

const isFarmAction = (access: Route['access']): access is Action =>
  access !== 'public' && access !== 'signedIn'

const requireSignIn: RequestHandler = (_request, response, next) => {
  signedInFrom(response.locals)
  next()
}

/** A farm one is not a member of does not exist, as far as one can tell. */
function requireMember({ database }: Services): RequestHandler {
  return async (request, response, next) => {
    const { farmId } = request.params
    if (!idSchema.safeParse(farmId).success) throw notFound()
    const { id } = signedInFrom(response.locals)
    const role = await accounts(database).roleOn(String(farmId), id)
    if (!role) throw notFound()
    response.locals.role = role
    next()
  }
}

function requirePermission(action: Action): RequestHandler {
  return (_request, response, next) => {
    const role = roleFrom(response)
    if (!may(role, action)) {
      throw new AppError('not_allowed', { detail: `The role ${role} does not include this.` })
    }
    next()
  }
}

function roleFrom(response: Response): Role {
  const role = response.locals.role as Role | undefined
  if (!role) throw new Error('asked for a role on a route that is not about a farm')
  return role
}

function requirePathIds(route: Route): RequestHandler {
  return (request, response, next) => {
    const parsed = route.params?.safeParse(request.params)
    if (parsed && !parsed.success) throw notFound()
    response.locals.params = parsed?.data
    next()
  }
}

const requireVersion: RequestHandler = (request, response, next) => {
  const match = /^"(\d{1,9})"$/.exec(request.get('if-match')?.trim() ?? '')
  if (!match) {
    throw new AppError('version_required', {
      detail: 'Send If-Match with the version you saw, for example If-Match: "3".',
    })
  }
  response.locals.version = Number(match[1])
  next()
}

const requireIdempotencyKey: RequestHandler = (request, response, next) => {
  const key = request.get('idempotency-key')?.trim() ?? ''
  if (!/^[\x21-\x7e]{8,200}$/.test(key)) {
    const message = 'Send an Idempotency-Key of 8 to 200 characters, a new one for each new attempt.'
    throw new AppError('invalid_input', {
      detail: message,
      errors: [{ path: 'header.Idempotency-Key', code: key ? 'invalid_format' : 'required', message }],
    })
  }
  response.locals.idempotencyKey = key
  next()
}

function answer(route: Route, services: Services): RequestHandler {
  return async (request, response) => {
    const query = route.query ? readInput(route.query, request.query, 'query') : undefined
    const body = route.body ? readBody(route, request.body) : undefined
    const call = makeCall(request, response, services, { query, body })
    try {
      send(route, response, await route.handle(call))
    } catch (error) {
      throw await withCurrent(error, route, call)
    }
  }
}

function readBody(route: Route, body: unknown): unknown {
  for (const [field, longest] of Object.entries(route.longTexts ?? {})) {
    const text =
      typeof body === 'object' && body !== null ? (body as Record<string, unknown>)[field] : undefined
    if (typeof text === 'string' && text.length > longest) {
      const message = `At most ${longest.toLocaleString('en')} characters.`
      throw new AppError('too_large', {
        detail: message,
        errors: [{ path: field, code: 'too_large', message }],
      })
    }
  }
  return route.body ? readInput(route.body, body ?? {}) : undefined
}

function makeCall(
  request: Request,
  response: Response,
  services: Services,
  input: { query: unknown; body: unknown },
): Call<unknown, unknown, unknown> {
  const { locals } = response
  const signedIn = () => signedInFrom(locals)
  const requestId = requestIdOf(response)
  const left = new AbortController()
  response.once('close', () => left.abort())
  return {
    ...services,
    ...input,
    params: locals.params as unknown,
    version: (locals.version as number | undefined) ?? 0,
    idempotencyKey: (locals.idempotencyKey as string | undefined) ?? '',
    signedIn,
    role: () => roleFrom(response),
    inFarm: (work) => {
      roleFrom(response)
      const actor = { userId: signedIn().id, requestId, day: clientDay(request) }
      const farmId = String(request.params.farmId)
      const { database } = services
      return database.transaction((transaction) => work(inFarm(database, farmId, transaction, actor)))
    },
    requestId,
    signal: left.signal,
    request,
    response,
  }
}

const DAY_MS = 24 * 3600 * 1000

/** The calendar day of the caller's clock (`Client-Day`), as long as it can be today somewhere on earth. */
function clientDay(request: Request): string | undefined {
  const given = dateSchema.safeParse(request.get('client-day'))
  const possible = [-1, 0, 1].map((days) => today(new Date(Date.now() + days * DAY_MS)))
  return given.success && possible.includes(given.data) ? given.data : undefined
}

function send(route: Route, response: Response, result: unknown): void {
  if (!route.answer) {
    response.status(route.status ?? 204).end()
    return
  }
  const body = route.answer.parse(result)
  if (typeof body === 'object' && body !== null && 'version' in body && typeof body.version === 'number') {
    response.setHeader('ETag', `"${body.version}"`)
  }
  response.status(route.status ?? 200).json(body)
}

/** With a stale version, what stands there now: the editor can show both and let the person choose. */
async function withCurrent(
  error: unknown,
  route: Route,
  call: Call<unknown, unknown, unknown>,
): Promise<unknown> {
  if (!(error instanceof AppError) || error.code !== 'stale_version' || !route.current) return error
  const schema = route.currentAnswer ?? route.answer
  const current = await route.current({ ...call, query: undefined, body: undefined })
  return new AppError('stale_version', { current: schema ? schema.parse(current) : undefined, cause: error })
}

function refuseMethod(allowed: string): RequestHandler {
  return (request, response, next) => {
    response.setHeader('Allow', allowed)
    if (request.method === 'OPTIONS') return void response.status(204).end()
    next(new AppError('method_not_allowed', { detail: `This address answers ${allowed}.` }))
  }
}
