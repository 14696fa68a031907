import { createHash, createHmac, randomBytes } from 'node:crypto'
import type { CookieOptions, Response } from 'express'
import jwt from 'jsonwebtoken'

export const ACCESS_SECONDS = 10 * 60
/** A sign-in that is not used for so long has to be made again. */
export const REFRESH_IDLE_MS = 14 * 24 * 3600 * 1000
/** However much it is used. */
export const SESSION_MS = 60 * 24 * 3600 * 1000

export interface AccessClaims {
  /** User. */
  sub: string
  /** Session. */
  sid: string
}

export const tokenIssuer = 'maslin'

/** A short-lived proof of who is signed in. What they may do is read from the database on each call. */
export function signAccessToken({ sub, sid }: AccessClaims, secret: string): string {
  return jwt.sign({ sid }, secret, {
    algorithm: 'HS256',
    subject: sub,
    issuer: tokenIssuer,
    audience: tokenIssuer,
    expiresIn: ACCESS_SECONDS,
  })
}

export const newRefreshToken = (): string => randomBytes(32).toString('base64url')

export const hashToken = (token: string): string => createHash('sha256').update(token).digest('hex')

/**
 * The refresh token that follows another one. Derived, so that two tabs refreshing at once get the same successor
 * although only hashes are stored; without the secret nobody can derive it.
 */
export const successorOf = (token: string, secret: string): string =>
  createHmac('sha256', secret).update(`refresh\0${token}`).digest('base64url')

export interface CookieNames {
  access: string
  refresh: string
}

/** Over TLS the names carry the prefixes that make browsers insist on the attributes. */
export const cookieNames = (secure: boolean): CookieNames =>
  secure
    ? { access: '__Host-maslin_access', refresh: '__Secure-maslin_refresh' }
    : { access: 'maslin_access', refresh: 'maslin_refresh' }

const refreshPath = '/api/v1/auth'

const attributes = (secure: boolean, path: string): CookieOptions => ({
  httpOnly: true,
  sameSite: 'lax',
  secure,
  path,
})
/** `__Host-` demands the root path. */
const accessPath = (secure: boolean) => (secure ? '/' : '/api')

export function setSessionCookies(
  response: Response,
  tokens: { access: string; refresh: string },
  secure: boolean,
): void {
  const names = cookieNames(secure)
  response.cookie(names.access, tokens.access, {
    ...attributes(secure, accessPath(secure)),
    maxAge: ACCESS_SECONDS * 1000,
  })
  response.cookie(names.refresh, tokens.refresh, {
    ...attributes(secure, refreshPath),
    maxAge: REFRESH_IDLE_MS,
  })
}

export function clearSessionCookies(response: Response, secure: boolean): void {
  const names = cookieNames(secure)
  response.clearCookie(names.access, attributes(secure, accessPath(secure)))
  response.clearCookie(names.refresh, attributes(secure, refreshPath))
}
