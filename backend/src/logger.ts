import { pino, type DestinationStream, type Logger } from 'pino'

const longestMessage = 500

interface LoggedError {
  type: string
  message: string
  at: string[]
  code?: unknown
  cause?: LoggedError
}

/**
 * What a log may hold of an error: its kind, its first words and where it came from. Errors of the database carry the
 * statement with its values, which are a farm's data or a person's secrets.
 */
export function describeError(error: unknown): LoggedError | undefined {
  if (!(error instanceof Error))
    return error === undefined ? undefined : { type: typeof error, message: '', at: [] }
  const cause = error.cause ?? ('original' in error ? error.original : undefined)
  return {
    type: error.name,
    message: (error.message.split(/\bsql:/i)[0] ?? '').trim().slice(0, longestMessage),
    at: (error.stack ?? '').split('\n').filter((line) => /^\s+at /.test(line)),
    ...('code' in error ? { code: error.code } : {}),
    ...(cause === undefined ? {} : { cause: describeError(cause) }),
  }
}

/** The server's log: JSON lines, without bodies, cookies, addresses' queries or statements. */
export function createLogger(level: string, destination?: DestinationStream): Logger {
  const options = { level, serializers: { err: describeError } }
  return destination ? pino(options, destination) : pino(options)
}
