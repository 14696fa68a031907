import compression from 'compression'
import cookieParser from 'cookie-parser'
import express, { type Express } from 'express'
import type { Logger } from 'pino'
import { recognise } from './auth/signedIn'
import { noSuchAddress, answerProblems } from './middleware/problems'
import { logRequests } from './middleware/logRequests'
import { requestId } from './middleware/requestContext'
import { sameOrigin } from './middleware/sameOrigin'
import { securityHeaders } from './middleware/securityHeaders'
import { serveFrontend } from './middleware/frontend'
import { routes } from './routes'
import { registerRoutes } from './routes/register'
import type { Services } from './routes/route'

export interface AppOptions extends Omit<Services, 'isOpen'> {
  logger: Logger
  isOpen?: () => boolean
}

/** The whole server but for listening: tests hand it to supertest, `server.ts` to a port. */
export function createApp({ logger, isOpen = () => true, ...parts }: AppOptions): Express {
  const services: Services = { ...parts, isOpen }
  const { config, database } = services
  const app = express()
  app.disable('x-powered-by')
  app.set('etag', false)
  app.set('query parser', 'simple')
  app.set('trust proxy', config.trustProxy)
  app.use(requestId, logRequests(logger), securityHeaders(config.secure), compression())
  app.use(
    '/api/v1',
    neverStored,
    sameOrigin(config.publicOrigin),
    cookieParser(),
    recognise({ database, jwtSecret: config.jwtSecret, secure: config.secure }),
    registerRoutes(routes, services),
  )
  app.use('/api', noSuchAddress)
  app.use(serveFrontend(config.frontendDirectory), noSuchAddress)
  app.use(answerProblems)
  return app
}

/** Answers hold a farm's data: no cache keeps them. */
const neverStored: express.RequestHandler = (_request, response, next) => {
  response.setHeader('Cache-Control', 'no-store')
  next()
}
