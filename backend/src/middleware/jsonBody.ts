import express, { type RequestHandler } from 'express'
import { AppError } from '../errors'

const usualLimit = 1_000_000

/** Half of a pair of code units is no letter: no database keeps it, and no hash can be computed over it alike. */
const halfLetter = /\p{Surrogate}/u

/** Keys that reach behind an object, and texts that are none, are refused before anything copies them. */
function refuseUnsafe(this: unknown, key: string, value: unknown): unknown {
  if (key === '__proto__') throw new SyntaxError('a key that is not allowed')
  if (halfLetter.test(key) || (typeof value === 'string' && halfLetter.test(value)))
    throw new SyntaxError('a text that is not well formed')
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
      reviver: refuseUnsafe,
    }),
  ]
}
