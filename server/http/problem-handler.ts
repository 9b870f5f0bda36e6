import type { NextFunction, Request, Response } from 'express'
import type { Logger } from 'pino'
import { problem } from '#shared/contracts/problems.ts'
import { Problem } from '#shared/kernel/problem.ts'
import { toProblem } from '../db/errors.ts'

/** Body-parser names its errors by `type`. */
function fromParser(error: unknown): unknown {
  if (!(error instanceof Error) || !('type' in error)) return error
  if (error.type === 'entity.too.large') return problem('batch-too-large')
  if (error.type === 'charset.unsupported' || error.type === 'encoding.unsupported') return problem('not-json')
  if (error.type === 'entity.parse.failed') return problem('unreadable-body')
  return error
}

/** Express and its parts mark what the caller did wrong with a 4xx status: a malformed address, a file not there. */
function fromExpress(error: unknown): unknown {
  if (!(error instanceof Error) || error instanceof Problem || !('status' in error)) return error
  if (error.status === 404) return problem('not-found', 'There is no such address.')
  if (typeof error.status === 'number' && error.status >= 400 && error.status < 500) {
    return problem('unreadable-body', 'The request cannot be read.')
  }
  return error
}

/** The last word on every failed call: RFC 9457, nothing of the inside, the request number for 500s. */
export function problemHandler(log: Logger) {
  return (error: unknown, req: Request, res: Response, next: NextFunction): void => {
    if (res.headersSent) return next(error)
    const known = toProblem(fromExpress(fromParser(error)))
    const id = String((req as { id?: unknown }).id ?? '')
    const answer = known instanceof Problem ? known : problem('internal', `Nothing was changed. Request ${id}.`)
    if (answer.status >= 500) log.error({ err: known, id, path: req.path }, answer.code)
    if (answer.retryAfter !== undefined) res.set('Retry-After', String(answer.retryAfter))
    res.status(answer.status).type('application/problem+json').send(JSON.stringify(answer))
  }
}
