/** Nothing is loaded from, sent to or framed by another origin. */
import helmet from 'helmet'
import type { RequestHandler } from 'express'
import type { Environment } from '../config/environment.ts'
import { ownOrigins } from '../config/origins.ts'

export function securityHeaders(environment: Environment): RequestHandler {
  const secure = environment.publicUrl.startsWith('https:')
  // A source list cannot name an IPv6 address; 'self' covers the page's own.
  const sockets = ownOrigins(environment)
    .filter((origin) => !origin.includes('['))
    .map((origin) => origin.replace(/^http/, 'ws'))
  return helmet({
    contentSecurityPolicy: {
      useDefaults: false,
      directives: {
        defaultSrc: ["'self'"],
        scriptSrc: ["'self'"],
        styleSrc: ["'self'"],
        styleSrcAttr: ["'none'"],
        imgSrc: ["'self'", 'data:'],
        fontSrc: ["'self'"],
        connectSrc: ["'self'", ...sockets],
        objectSrc: ["'none'"],
        baseUri: ["'none'"],
        formAction: ["'self'"],
        frameAncestors: ["'none'"],
      },
    },
    crossOriginEmbedderPolicy: true,
    referrerPolicy: { policy: 'no-referrer' },
    strictTransportSecurity: secure ? { maxAge: 31_536_000 } : false,
    xFrameOptions: { action: 'deny' },
  })
}
