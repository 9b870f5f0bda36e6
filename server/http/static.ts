import { existsSync } from 'node:fs'
import { join } from 'node:path'
import express, { Router } from 'express'

const accepted = (header: string | undefined, name: string): boolean =>
  (header ?? '').split(',').some((e) => e.trim().split(';')[0] === name)

/**
 * The built client. Hashed assets never change and are kept for a year; the page, the worker and the manifest are
 * asked for anew each time. Compressed copies made at build time are sent where the browser takes them.
 */
export function clientFiles(dir: string): Router {
  const router = Router()
  router.use((req, res, next) => {
    if (req.method !== 'GET' && req.method !== 'HEAD') return next()
    const path = req.path === '/' ? '/index.html' : req.path
    if (!/\.(js|css|html|svg|json|webmanifest|txt)$/.test(path) || path.includes('..')) return next()
    for (const [encoding, ending] of [
      ['br', '.br'],
      ['gzip', '.gz'],
    ] as const) {
      if (!accepted(req.headers['accept-encoding'], encoding) || !existsSync(join(dir, path + ending))) continue
      res.set('Content-Encoding', encoding)
      res.vary('Accept-Encoding')
      res.type(path.slice(path.lastIndexOf('.')))
      req.url = path + ending
      break
    }
    next()
  })
  router.use(
    express.static(dir, {
      index: 'index.html',
      setHeaders(res, file) {
        const hashed = file.includes(`${join(dir, 'assets')}`)
        res.setHeader('Cache-Control', hashed ? 'public, max-age=31536000, immutable' : 'no-cache')
        if (file.endsWith('.br') || file.endsWith('.gz')) {
          const plain = file.replace(/\.(br|gz)$/, '')
          const type = {
            js: 'text/javascript',
            css: 'text/css',
            html: 'text/html',
            svg: 'image/svg+xml',
            json: 'application/json',
            webmanifest: 'application/manifest+json',
            txt: 'text/plain',
          }[plain.slice(plain.lastIndexOf('.') + 1)]
          if (type) res.setHeader('Content-Type', `${type}; charset=utf-8`)
        }
      },
    }),
  )
  // Every page address is the app; addresses with a file ending that is not there are not.
  router.get('/{*path}', (req, res, next) => {
    if (/^\/(api|healthz|readyz)(\/|$)/.test(req.path) || /\.[a-z0-9]{2,12}$/i.test(req.path)) return next()
    res.set('Cache-Control', 'no-cache')
    res.sendFile('index.html', { root: dir })
  })
  return router
}
