import helmet from 'helmet'
import { randomBytes } from 'node:crypto'
import type { RequestHandler, Response } from 'express'

const nonces = new WeakMap<object, string>()

/** The word by which this answer's policy knows the one style element that its page makes. */
export function styleNonceOf(response: Response): string {
  const known = nonces.get(response)
  if (known) return known
  const nonce = randomBytes(16).toString('base64')
  nonces.set(response, nonce)
  return nonce
}

/**
 * What a browser may load and do with our pages. Scripts come from here alone, none of them inline; `wasm-unsafe-eval`
 * lets the solver's WebAssembly compile and nothing else. The component library writes its theme into a style element at
 * run time: it is told the answer's nonce, and no other inline style counts.
 * @param secure served over TLS: browsers are told to stay with https
 */
export function securityHeaders(secure: boolean): RequestHandler {
  return helmet({
    contentSecurityPolicy: {
      useDefaults: false,
      directives: {
        defaultSrc: ["'self'"],
        scriptSrc: ["'self'", "'wasm-unsafe-eval'"],
        scriptSrcAttr: ["'none'"],
        styleSrc: ["'self'", (_request, response) => `'nonce-${styleNonceOf(response as Response)}'`],
        imgSrc: ["'self'", 'data:', 'blob:'],
        fontSrc: ["'self'", 'data:'],
        connectSrc: ["'self'"],
        workerSrc: ["'self'"],
        objectSrc: ["'none'"],
        baseUri: ["'none'"],
        formAction: ["'self'"],
        frameAncestors: ["'none'"],
      },
    },
    strictTransportSecurity: secure,
    crossOriginEmbedderPolicy: false,
    referrerPolicy: { policy: 'same-origin' },
    xFrameOptions: { action: 'deny' },
  })
}
