import express, { type RequestHandler } from 'express'
import { ProblemError } from '#shared/problems'

const looksLikeFile = (path: string): boolean =>
  path.split('/').some((step) => step.startsWith('.')) || /\.[^/]*$/.test(path) || path.endsWith('.map')

/**
 * The built client: files with a hash in their name for good, index.html for every address that is a page.
 * Anything that looks like a file and is none, and everything under /api, is left to the 404.
 */
export function clientFiles(folder: string): RequestHandler[] {
  const files = express.static(folder, {
    index: false,
    dotfiles: 'ignore',
    etag: false,
    redirect: false,
    setHeaders: (res, path) =>
      res.setHeader(
        'Cache-Control',
        /[\\/]assets[\\/]/.test(path) ? 'public, max-age=31536000, immutable' : 'no-cache',
      ),
  })
  return [
    (req, res, next) => (req.path.endsWith('.map') || req.path === '/index.html' ? next() : files(req, res, next)),
    (req, res, next) => {
      const isPage = req.method === 'GET' || req.method === 'HEAD'
      const path = decodeURIComponent(req.path)
      if (!isPage || /^\/(api|assets|health|csp-reports)(\/|$)/.test(path) || looksLikeFile(path)) return next()
      res.set('Cache-Control', 'no-cache')
      res.sendFile('index.html', { root: folder, etag: false, cacheControl: false }, (error) => {
        if (error && !res.headersSent) next(new ProblemError('not-found', 'The client is not built yet.'))
      })
    },
  ]
}
