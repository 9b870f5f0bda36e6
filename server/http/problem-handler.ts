import type { NextFunction, Request, Response } from 'express'
import type { Logger } from 'pino'
import { problem } from '#shared/contracts/problems.ts'
import { Problem } from '#shared/kernel/problem.ts'
import { toProblem } from '../db/errors.ts'

/** Body-parser names its errors by `type`. */
function fromParser(error: unknown): unknown {
  if (!(error instanceof Error) || !('type' in error)) return error
  if (error.type === 'entity.too.large') return problem('batch-too-large')
  if (
    error.type === 'entity.parse.failed' ||
    error.type === 'charset.unsupported' ||
    error.type === 'encoding.unsupported'
  ) {
    return problem('unreadable-body')
  }
  return error
}

/** The last word on every failed call: RFC 9457, nothing of the inside, the request number for 500s. */
export function problemHandler(log: Logger) {
  return (error: unknown, req: Request, res: Response, next: NextFunction): void => {
    if (res.headersSent) return next(error)
    const known = toProblem(fromParser(error))
    const id = String((req as { id?: unknown }).id ?? '')
    const answer = known instanceof Problem ? known : problem('internal', `Nothing was changed. Request ${id}.`)
    if (answer.status >= 500) log.error({ err: known, id, path: req.path }, answer.code)
    if (answer.retryAfter !== undefined) res.set('Retry-After', String(answer.retryAfter))
    res.status(answer.status).type('application/problem+json').send(JSON.stringify(answer))
  }
}
