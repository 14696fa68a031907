import type { RequestHandler } from 'express'
import { AppError } from '../errors'

const reading = new Set(['GET', 'HEAD', 'OPTIONS'])

/**
 * Refuses calls that change something when a page of another site sent them. Browsers say where a call comes from;
 * scripts that send no Origin are let through, since they hold no cookies of somebody else.
 * @param publicOrigin where people reach Maslin; undefined: whatever the Host header says
 */
export function sameOrigin(publicOrigin: string | undefined): RequestHandler {
  return (request, _response, next) => {
    if (reading.has(request.method)) return next()
    const origin = request.get('origin')
    const site = request.get('sec-fetch-site')
    const foreign =
      (origin !== undefined && !isOwn(origin, request.get('host'), publicOrigin)) ||
      (site !== undefined && site !== 'same-origin' && site !== 'none')
    next(
      foreign ? new AppError('origin_refused', { detail: 'This call came from another site.' }) : undefined,
    )
  }
}

function isOwn(origin: string, host: string | undefined, publicOrigin: string | undefined): boolean {
  if (publicOrigin) return origin === publicOrigin
  return URL.canParse(origin) && new URL(origin).host === host
}
