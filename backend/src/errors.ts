import { problemCodes, type FieldProblem, type ProblemCode } from '@maslin/shared'

export interface ProblemDetails {
  /** What happened and what to do about it, for people. */
  detail?: string
  errors?: FieldProblem[]
  /** With `stale_version`: the thing as it stands now, in the shape the API answers. */
  current?: unknown
  /** Further answer headers, such as `Retry-After`. */
  headers?: Record<string, string>
  cause?: unknown
}

/** The one error that services and routes throw: answered as RFC 9457 problem details with the status of its code. */
export class AppError extends Error {
  readonly code: ProblemCode
  readonly status: number
  readonly detail: string | undefined
  readonly errors: FieldProblem[] | undefined
  readonly current: unknown
  readonly headers: Record<string, string>

  constructor(code: ProblemCode, details: ProblemDetails = {}) {
    super(details.detail ?? code, { cause: details.cause })
    this.name = 'AppError'
    this.code = code
    this.status = problemCodes[code]
    this.detail = details.detail
    this.errors = details.errors
    this.current = details.current
    this.headers = details.headers ?? {}
  }
}

/** What is asked for does not exist, or is not this farm's: the answer does not tell which. */
export const notFound = (detail?: string): AppError => new AppError('not_found', detail ? { detail } : {})

/** One field of the request is wrong in a way the schema cannot know. */
export const invalidField = (path: string, code: string, message: string): AppError =>
  new AppError('invalid_input', { detail: message, errors: [{ path, code, message }] })
