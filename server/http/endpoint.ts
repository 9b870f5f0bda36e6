import express, { type NextFunction, type Request, type Response, type Router } from 'express'
import { z } from 'zod'
import type { Contract } from '#shared/contracts/contract.ts'
import { fieldProblem, problem } from '#shared/contracts/problems.ts'
import { wordIssue } from '#shared/contracts/wording.ts'
import type { FieldError } from '#shared/kernel/problem.ts'
import type { Clock } from '../clock.ts'
import type { Db, Tx } from '../db/client.ts'
import { inTransaction } from '../db/transaction.ts'
import type { Actor, AppDeps } from './context.ts'
import { illFormedAt, pointerOf } from './well-formed.ts'

/** Every registered route; the permission test and the OpenAPI document read it. */
export interface RegisteredRoute {
  contract: Contract
}

/** What a handler is given. `tx` is a transaction for writes and the pool for reads. */
export interface Call<C extends Contract, T> {
  tx: T
  db: Db
  clock: Clock
  actor: Actor
  params: z.output<C['params']>
  query: z.output<C['query']>
  body: z.output<C['body']>
  req: Request
  res: Response
}

const json = (limit: number) => express.json({ limit, strict: false, type: 'application/json' })
const parsers = new Map<number, ReturnType<typeof json>>()

/** One parser for each size of body a contract allows. */
function parserFor(limit: number): ReturnType<typeof json> {
  const known = parsers.get(limit) ?? json(limit)
  parsers.set(limit, known)
  return known
}
const bodyless = new Set(['GET', 'DELETE'])

/** JSON pointers for what zod found. */
export function fieldErrors(error: z.ZodError, root = ''): FieldError[] {
  return error.issues.flatMap((issue) => {
    const at = root + pointerOf(issue.path)
    if (issue.code === 'unrecognized_keys') {
      return issue.keys.map((key) => ({
        pointer: at + pointerOf([key]),
        detail: 'this field is not known here',
      }))
    }
    return [{ pointer: at, detail: wordIssue(issue) }]
  })
}

function parsed<T extends z.ZodType>(schema: T, value: unknown, root = ''): z.output<T> {
  const result = schema.safeParse(value)
  if (result.success) return result.data as z.output<T>
  const errors = fieldErrors(result.error, root)
  throw problem('invalid-request', errors[0] ? `${errors[0].pointer || '/'}: ${errors[0].detail}` : undefined, {
    errors,
  })
}

/** Ids are opaque: one that cannot be is simply not there. */
function parsedParams<C extends Contract>(contract: C, params: unknown): z.output<C['params']> {
  const result = contract.params.safeParse(params)
  if (!result.success) throw problem('not-found')
  return result.data as z.output<C['params']>
}

/** Express' own body parser, awaited, after rights were checked. */
async function readBody(req: Request, res: Response, contract: Contract): Promise<unknown> {
  if (bodyless.has(contract.method)) return undefined
  const length = Number(req.headers['content-length'] ?? 0)
  const hasBody = length > 0 || req.headers['transfer-encoding'] !== undefined
  if (!hasBody) return undefined
  if (!req.is('application/json')) throw problem('not-json')
  await new Promise<void>((resolve, reject) => {
    parserFor(contract.largest)(req, res, (error?: unknown) => (error ? reject(error as Error) : resolve()))
  })
  return req.body as unknown
}

/** A call without a body may carry an empty object; text has to be text, but where each entry is judged alone. */
function bodyFor(contract: Contract, body: unknown): unknown {
  const empty = typeof body === 'object' && body !== null && Object.keys(body).length === 0
  if (empty && contract.body instanceof z.ZodUndefined) return undefined
  const broken = contract.judgesEntries ? null : illFormedAt(body)
  if (broken !== null) throw fieldProblem(broken, 'this text has a broken character: type it anew')
  return body
}

export function mayCall(contract: Contract, actor: Actor | null): 'yes' | 'sign-in' | 'no' {
  if (contract.allow === 'anyone') return 'yes'
  if (!actor) return 'sign-in'
  return contract.allow === 'signed-in' || contract.allow.includes(actor.role) ? 'yes' : 'no'
}

type Work<C extends Contract, T> = (call: Call<C, T>) => Promise<z.input<C['answer']>>

/** Binds contracts to Express: rights → body → validation → one transaction → answer after commit. */
export class Routes {
  readonly registered: RegisteredRoute[] = []

  constructor(
    readonly router: Router,
    private readonly deps: AppDeps,
  ) {}

  read<C extends Contract>(contract: C, work: Work<C, Db>): void {
    this.bind(contract, (call) => work({ ...call, tx: call.db }))
  }

  write<C extends Contract>(contract: C, work: Work<C, Tx>): void {
    this.bind(contract, (call) => inTransaction(call.db, (tx) => work({ ...call, tx })))
  }

  /** For calls that commit piece by piece. */
  steps<C extends Contract>(contract: C, work: Work<C, Db>): void {
    this.bind(contract, (call) => work({ ...call, tx: call.db }))
  }

  private bind<C extends Contract>(contract: C, run: (call: Omit<Call<C, unknown>, 'tx'>) => Promise<unknown>): void {
    this.registered.push({ contract })
    const handler = async (req: Request, res: Response, _next: NextFunction): Promise<void> => {
      const actor = ((req as { user?: unknown }).user as Actor | undefined) ?? null
      const right = mayCall(contract, actor)
      if (right === 'sign-in') throw problem('not-signed-in')
      if (right === 'no') throw problem('not-allowed')
      const body = bodyFor(contract, await readBody(req, res, contract))
      const answer = await run({
        db: this.deps.db,
        clock: this.deps.clock,
        actor: actor as Actor,
        params: parsedParams(contract, req.params),
        query: parsed(contract.query, req.query) as z.output<C['query']>,
        body: parsed(contract.body, body) as z.output<C['body']>,
        req,
        res,
      })
      if (res.headersSent) return
      if (contract.status === 204) res.status(204).end()
      else res.status(res.statusCode === 200 ? contract.status : res.statusCode).json(answer)
    }
    const method = contract.method.toLowerCase() as 'get' | 'post' | 'patch' | 'delete'
    this.router[method](contract.path, handler)
  }
}
