/** The built client: hashed files for ever, the page itself never from a cache. */
import { join } from 'node:path'
import express from 'express'
import type { RequestHandler, Router } from 'express'

const forEver = 'public, max-age=31536000, immutable'

export function client(folder: string): Router {
  const router = express.Router()
  router.use(
    express.static(folder, {
      index: false,
      setHeaders: (response, path) => {
        const hashed = path.startsWith(join(folder, 'assets'))
        response.setHeader('Cache-Control', hashed ? forEver : 'no-cache')
      },
    }),
  )
  router.get('/{*page}', page(folder))
  return router
}

/** The signed links of e-mails have points in them and are no files. */
const isFile = (path: string): boolean => /\.\w+$/.test(path) && !/^\/(receipt|welcome)\/[^/]+$/.test(path)

/** Every path of the client's router is the same page; a missing file is missing and no page. */
const page =
  (folder: string): RequestHandler =>
  (request, response, next) => {
    if (isFile(request.path)) return next()
    response.sendFile(
      join(folder, 'index.html'),
      { cacheControl: false, headers: { 'Cache-Control': 'no-cache' } },
      (error) => {
        if (error) next(response.headersSent ? error : undefined)
      },
    )
  }
