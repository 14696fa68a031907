import { Passport } from 'passport'
import { Strategy } from 'passport-jwt'
import type { Request, RequestHandler } from 'express'
import { AppError } from '../errors'
import { accounts } from '../repositories/accounts'
import type { Database } from '../database/database'
import { cookieNames, tokenIssuer, type AccessClaims } from './tokens'

export interface SignedIn {
  id: string
  name: string
  email: string
  sessionId: string
}

export interface SignInOptions {
  database: Database
  jwtSecret: string
  secure: boolean
}

/**
 * Puts who is calling into `response.locals.signedIn`, or nobody. The token only names the session: whether it still
 * holds is read from the database, so that signing out takes effect at once.
 */
export function recognise({ database, jwtSecret, secure }: SignInOptions): RequestHandler {
  const passport = new Passport()
  const cookie = cookieNames(secure).access
  passport.use(
    new Strategy(
      {
        secretOrKey: jwtSecret,
        algorithms: ['HS256'],
        issuer: tokenIssuer,
        audience: tokenIssuer,
        jwtFromRequest: (request: Request) => cookieOf(request, cookie) ?? null,
      },
      (claims: AccessClaims, done) => {
        findSignedIn(database, claims).then(
          (signedIn) => done(null, signedIn ?? false),
          (error: unknown) => done(error, false),
        )
      },
    ),
  )
  return (request, response, next) => {
    const authenticate = passport.authenticate(
      'jwt',
      { session: false },
      (error: unknown, signedIn: SignedIn | false | undefined) => {
        if (signedIn) response.locals.signedIn = signedIn
        next(error ?? undefined)
      },
    ) as RequestHandler
    void authenticate(request, response, next)
  }
}

async function findSignedIn(database: Database, { sub, sid }: AccessClaims): Promise<SignedIn | undefined> {
  const person = await accounts(database).personOf(sid)
  return person?.id === sub ? { ...person, sessionId: sid } : undefined
}

export function cookieOf(request: Request, name: string): string | undefined {
  const cookies = request.cookies as Record<string, unknown>
  const value = cookies[name]
  return typeof value === 'string' && value.length <= 4096 ? value : undefined
}

/** @throws AppError `not_signed_in` */
export function signedInFrom(locals: Record<string, unknown>): SignedIn {
  const signedIn = locals.signedIn as SignedIn | undefined
  if (!signedIn) throw new AppError('not_signed_in')
  return signedIn
}
