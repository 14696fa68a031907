import type { Request, RequestHandler, Response } from 'express'
import type { Logger } from 'pino'
import { pinoHttp } from 'pino-http'
import type { SignedIn } from '../auth/signedIn'
import { describeError } from '../logger'
import { requestIdOf } from './requestContext'

/** One line per request: what, who, how long, with its id. Never bodies, headers, cookies or query values. */
export function logRequests(logger: Logger): RequestHandler {
  return pinoHttp<Request, Response>({
    logger,
    genReqId: (_request, response) => requestIdOf(response),
    quietReqLogger: true,
    customAttributeKeys: { reqId: 'requestId' },
    customLogLevel: (_request, response, error) =>
      error || response.statusCode >= 500 ? 'error' : response.statusCode >= 400 ? 'info' : 'debug',
    customSuccessObject: (request, response, value: object) => ({
      ...value,
      ...whatHappened(request, response),
    }),
    customErrorObject: (request, response, _error, value: { responseTime?: number }) => ({
      responseTime: value.responseTime,
      ...whatHappened(request, response),
    }),
    wrapSerializers: false,
    serializers: { req: () => undefined, res: () => undefined, err: describeError },
  })
}

const whatHappened = (request: Request, response: Response) => ({
  method: request.method,
  path: request.originalUrl.split('?')[0],
  status: response.statusCode,
  userId: (response.locals.signedIn as SignedIn | undefined)?.id,
})
