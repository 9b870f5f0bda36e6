import type { NextFunction, Request, Response } from 'express'
import { problem } from '#shared/contracts/problems.ts'

const writes = new Set(['POST', 'PUT', 'PATCH', 'DELETE'])

/** Every API reply is marked, so that a phone can tell us from a network's sign-in page, and is never cached. */
export function markReply(_req: Request, res: Response, next: NextFunction): void {
  res.set('X-Brimline', '1')
  res.set('Cache-Control', 'no-store')
  next()
}

/** Writes come from our own pages: same origin, with the marker header no form can set. Source: OWASP CSRF prevention. */
export function sameOriginWrites(req: Request, _res: Response, next: NextFunction): void {
  if (!writes.has(req.method)) return next()
  const site = req.get('sec-fetch-site')
  if (site !== undefined && site !== 'same-origin' && site !== 'none') return next(problem('cross-site'))
  const origin = req.get('origin')
  if (origin !== undefined && hostOf(origin) !== req.get('host')) return next(problem('cross-site'))
  if (req.get('x-brimline') !== '1') return next(problem('marker-missing'))
  next()
}

function hostOf(origin: string): string | null {
  try {
    return new URL(origin).host
  } catch {
    return null
  }
}

export function permissions(_req: Request, res: Response, next: NextFunction): void {
  res.set('Permissions-Policy', 'camera=(self), microphone=(), geolocation=(), payment=(), usb=()')
  next()
}
