import type { RequestHandler } from 'express'
import { v7 as uuidv7 } from 'uuid'

/** Every answer carries the request's id: the caller's own where it is a sane one, else a new one. */
export const requestId: RequestHandler = (request, response, next) => {
  const given = request.get('x-request-id')
  const id = given && /^[\w.:-]{8,100}$/.test(given) ? given : uuidv7()
  response.locals.requestId = id
  response.setHeader('X-Request-Id', id)
  next()
}

export const requestIdOf = (response: { locals: Record<string, unknown> }): string =>
  String(response.locals.requestId ?? '')
