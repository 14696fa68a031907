import type { RequestHandler } from 'express'
import { rateLimit } from 'express-rate-limit'
import { AppError } from '../errors'

const windowMs = 15 * 60 * 1000

/** Lets one address try a thing so many times in a quarter of an hour. Counted by each process for itself. */
export function attemptLimit(attempts: number): RequestHandler {
  return rateLimit({
    windowMs,
    limit: attempts,
    standardHeaders: 'draft-7',
    legacyHeaders: false,
    // Without a proxy of ours in front, that header is anybody's to write and is not looked at.
    validate: { xForwardedForHeader: false },
    handler: (_request, response, next) => {
      response.setHeader('Retry-After', String(windowMs / 1000))
      next(new AppError('too_many_requests'))
    },
  })
}
