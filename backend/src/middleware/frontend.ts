import express, { Router, type RequestHandler } from 'express'
import { existsSync } from 'node:fs'
import { readFile } from 'node:fs/promises'
import { join } from 'node:path'
import { styleNonceOf } from './securityHeaders'

/** Stands in the built page where each answer's own nonce goes. */
const NONCE_PLACE = '__STYLE_NONCE__'

/**
 * Serves the built pages. Files with a hash in their name never change and are kept for a year; the page itself is
 * asked for each time, so that a new build shows at once. Addresses of pages all answer with it.
 */
export function serveFrontend(directory: string): Router {
  const page = join(directory, 'index.html')
  const router = Router()
  router.use(
    '/assets',
    express.static(join(directory, 'assets'), {
      immutable: true,
      maxAge: '365d',
      index: false,
      fallthrough: true,
    }),
    // A file of an older build is gone: answering with the page would be taken for a script.
    (_request, _response, next) => next('router'),
  )
  const sendPage: RequestHandler = async (_request, response, next) => {
    if (!existsSync(page)) return next()
    const text = await readFile(page, 'utf8')
    response.setHeader('Cache-Control', 'no-store')
    response.type('html').send(text.replace(NONCE_PLACE, styleNonceOf(response)))
  }
  // Under its own name it is the same page, and no cache keeps it either.
  router.get('/index.html', sendPage)
  router.use(express.static(directory, { index: false, maxAge: '1h' }))
  router.get('/{*path}', sendPage)
  return router
}
