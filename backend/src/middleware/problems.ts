import { problemCodes, type Problem, type ProblemCode } from '@maslin/shared'
import type { ErrorRequestHandler, RequestHandler } from 'express'
import {
  ConnectionAcquireTimeoutError,
  ConnectionError,
  ForeignKeyConstraintError,
  UniqueConstraintError,
} from 'sequelize'
import { databaseErrorNumber } from '../database/database'
import { AppError, notFound } from '../errors'
import { requestIdOf } from './requestContext'

const titles: Partial<Record<ProblemCode, string>> = {
  invalid_input: 'Some of what was sent cannot be used',
  malformed_json: 'The request is not readable JSON',
  not_signed_in: 'Sign in first',
  wrong_sign_in: 'E-mail address or password is wrong',
  session_ended: 'The session has ended',
  not_allowed: 'Your role does not allow this',
  not_found: 'Not found',
  method_not_allowed: 'This address does not answer that method',
  stale_version: 'Somebody changed this in the meantime',
  version_required: 'Say which version you are changing (If-Match)',
  too_large: 'Too large',
  unsupported_type: 'Send JSON',
  in_use: 'Still in use',
  too_many_requests: 'Too many attempts; wait a little',
  internal_error: 'Something went wrong on our side',
  busy: 'Busy; try again shortly',
  not_ready: 'Not ready; try again shortly',
}

/** The answer to an address that no route has. */
export const noSuchAddress: RequestHandler = (_request, _response, next) => next(notFound())

/** Answers every failure as problem details (RFC 9457). What is not foreseen is logged whole and answered in general. */
export const answerProblems: ErrorRequestHandler = (thrown: unknown, request, response, next) => {
  if (response.headersSent) return next(thrown)
  const error = toAppError(thrown)
  if (error.status >= 500)
    request.log.error({ err: error.cause ?? error, code: error.code }, 'request failed')
  const problem: Problem = {
    type: 'about:blank',
    title: titles[error.code] ?? error.code.replaceAll('_', ' '),
    status: error.status,
    code: error.code,
    detail: error.detail,
    requestId: requestIdOf(response),
    errors: error.errors,
    current: error.current,
  }
  response
    .set(error.headers)
    .status(error.status)
    .type('application/problem+json')
    .send(JSON.stringify(problem))
}

const DUPLICATE = 1062
const STILL_REFERENCED = 1451
const REFERENCE_GONE = 1452
const LOCK_WAIT_TIMEOUT = 1205
const DEADLOCK = 1213

function toAppError(thrown: unknown): AppError {
  if (thrown instanceof AppError) return thrown
  // An address that cannot be decoded is the address of nothing.
  if (thrown instanceof URIError) return notFound()
  const number = databaseErrorNumber(thrown)
  if (thrown instanceof ForeignKeyConstraintError && number === STILL_REFERENCED) {
    return new AppError('in_use', { detail: 'Something else still refers to it.', cause: thrown })
  }
  if (number === REFERENCE_GONE) {
    return new AppError('conflict', {
      detail: 'What it refers to was removed in the meantime.',
      cause: thrown,
    })
  }
  if (thrown instanceof UniqueConstraintError || number === DUPLICATE) {
    return new AppError('conflict', { detail: 'This exists already.', cause: thrown })
  }
  if (
    number === LOCK_WAIT_TIMEOUT ||
    number === DEADLOCK ||
    thrown instanceof ConnectionAcquireTimeoutError
  ) {
    return new AppError('busy', { cause: thrown, headers: { 'Retry-After': '1' } })
  }
  if (thrown instanceof ConnectionError) {
    return new AppError('not_ready', { cause: thrown, headers: { 'Retry-After': '2' } })
  }
  return fromParser(thrown) ?? new AppError('internal_error', { cause: thrown })
}

/** Failures of the body parser and of the router, which name themselves by type and status. */
function fromParser(thrown: unknown): AppError | undefined {
  if (!(thrown instanceof Error) || !('status' in thrown) || typeof thrown.status !== 'number')
    return undefined
  const code = parserCodes[thrown.status]
  return code && problemCodes[code] < 500 ? new AppError(code, { cause: thrown }) : undefined
}

const parserCodes: Record<number, ProblemCode> = {
  400: 'malformed_json',
  413: 'too_large',
  415: 'unsupported_type',
}
