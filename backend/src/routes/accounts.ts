import { sessionSchema, signInSchema, signUpSchema } from '@maslin/shared'
import type { Response } from 'express'
import { cookieOf, type SignedIn } from '../auth/signedIn'
import { clearSessionCookies, cookieNames, setSessionCookies } from '../auth/tokens'
import { AppError } from '../errors'
import {
  describeSession,
  refreshSession,
  signIn,
  signOut,
  signUp,
  type SignInResult,
} from '../services/accounts'
import { route, type Services } from './route'

interface Cookied extends Services {
  response: Response
}

function answerSession({ response, config }: Cookied, { session, tokens }: SignInResult) {
  setSessionCookies(response, tokens, config.secure)
  return session
}

export const accountRoutes = [
  route({
    method: 'post',
    path: '/auth/sign-up',
    access: 'public',
    attemptsPerQuarterHour: 20,
    body: signUpSchema,
    answer: sessionSchema,
    status: 201,
    handle: async (call) =>
      answerSession(call, await signUp(call.database, call.config.jwtSecret, call.body, call.requestId)),
  }),
  route({
    method: 'post',
    path: '/auth/sign-in',
    access: 'public',
    attemptsPerQuarterHour: 30,
    body: signInSchema,
    answer: sessionSchema,
    handle: async (call) =>
      answerSession(call, await signIn(call.database, call.config.jwtSecret, call.body)),
  }),
  route({
    method: 'post',
    path: '/auth/refresh',
    access: 'public',
    attemptsPerQuarterHour: 120,
    answer: sessionSchema,
    handle: async (call) => {
      const { config, database, request, response } = call
      try {
        const token = cookieOf(request, cookieNames(config.secure).refresh)
        return answerSession(call, await refreshSession(database, config.jwtSecret, token))
      } catch (error) {
        if (error instanceof AppError && error.code === 'session_ended') {
          clearSessionCookies(response, config.secure)
        }
        throw error
      }
    },
  }),
  route({
    method: 'post',
    path: '/auth/sign-out',
    access: 'public',
    handle: async ({ config, database, request, response }) => {
      const signedIn = response.locals.signedIn as SignedIn | undefined
      const refreshToken = cookieOf(request, cookieNames(config.secure).refresh)
      await signOut(database, { sessionId: signedIn?.sessionId, refreshToken })
      clearSessionCookies(response, config.secure)
    },
  }),
  route({
    method: 'get',
    path: '/auth/session',
    access: 'signedIn',
    answer: sessionSchema,
    handle: ({ database, signedIn }) => describeSession(database, signedIn()),
  }),
]
