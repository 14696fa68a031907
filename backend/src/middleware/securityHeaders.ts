import helmet from 'helmet'
import type { RequestHandler } from 'express'

/**
 * What a browser may load and do with our pages. Scripts come from here alone, none of them inline; `wasm-unsafe-eval`
 * lets the solver's WebAssembly compile and nothing else. The component library writes its theme into a style element
 * at run time, so inline styles are allowed.
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
        styleSrc: ["'self'", "'unsafe-inline'"],
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
