import express, { type RequestHandler } from 'express'
import { AppError } from '../errors'

const usualLimit = 1_000_000

/** Keys that reach behind an object are refused before anything copies them. */
function refusePrototypeKeys(this: unknown, key: string, value: unknown): unknown {
  if (key === '__proto__') throw new SyntaxError('a key that is not allowed')
  return value
}

/** Reads a JSON body, and nothing but JSON. */
export function jsonBody(limit = usualLimit): RequestHandler[] {
  return [
    (request, _response, next) => {
      const hasBody =
        request.headers['transfer-encoding'] !== undefined || Number(request.get('content-length')) > 0
      if (hasBody && !request.is(['application/json', 'application/*+json'])) {
        throw new AppError('unsupported_type', { detail: 'Send Content-Type: application/json.' })
      }
      next()
    },
    express.json({
      limit,
      inflate: false,
      strict: true,
      type: ['application/json', 'application/*+json'],
      reviver: refusePrototypeKeys,
    }),
  ]
}
