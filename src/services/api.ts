import { z } from 'zod'
import type { Contract } from '#shared/contracts/contract.ts'
import { Problem } from '#shared/kernel/problem.ts'

const BASE = '/api/v1'
const TIMEOUT_MS = 20_000

/** Why no answer of ours came: no network, another program answered (a captive portal), or it took too long. */
export type OfflineReason = 'network' | 'not-ours' | 'timeout'

/** There was no answer that can be believed. Never a Problem: nothing is known about what the server did. */
export class Offline extends Error {
  readonly reason: OfflineReason

  constructor(reason: OfflineReason, cause?: unknown) {
    super(`offline: ${reason}`, cause === undefined ? undefined : { cause })
    this.name = 'Offline'
    this.reason = reason
  }
}

interface Listener {
  /** A believed reply came, whatever its status. */
  reply?: () => void
  /** The server says that nobody is signed in. */
  signedOut?: () => void
  /** No answer came at all. */
  unreached?: () => void
}
const listeners = new Set<Listener>()

/** Tells the caller of every believed reply, of every `not-signed-in`, and of every call that reached nobody. Returns the way to stop. */
export function onContact(listener: Listener): () => void {
  listeners.add(listener)
  return () => listeners.delete(listener)
}

export interface CallParts<P extends z.ZodType, Q extends z.ZodType, B extends z.ZodType> {
  params?: z.input<P>
  query?: z.input<Q>
  body?: z.input<B>
  signal?: AbortSignal
}

/** The address of a contract with its parameters and query filled in; undefined and empty values are left out. */
export function urlOf(path: string, params: Record<string, unknown> = {}, query: Record<string, unknown> = {}): string {
  const filled = path.replace(/:(\w+)/g, (_, name: string) => {
    const value = params[name]
    if (value === undefined) throw new TypeError(`${path} needs the parameter ${name}`)
    return encodeURIComponent(String(value))
  })
  const search = new URLSearchParams()
  for (const [key, value] of Object.entries(query)) {
    if (value !== undefined && value !== null && value !== '') search.set(key, String(value))
  }
  const text = search.toString()
  return BASE + filled + (text ? `?${text}` : '')
}

async function send(url: string, init: RequestInit, signal: AbortSignal | undefined): Promise<Response> {
  const limit = AbortSignal.timeout(TIMEOUT_MS)
  try {
    return await fetch(url, { ...init, signal: signal ? AbortSignal.any([signal, limit]) : limit })
  } catch (cause) {
    if (signal?.aborted) throw cause
    for (const listener of listeners) listener.unreached?.()
    throw new Offline(limit.aborted ? 'timeout' : 'network', cause)
  }
}

/** A reply is ours only if it was not redirected, carries the marker and, where it has a body, is JSON. */
function believe(response: Response): void {
  const ours = response.headers.get('X-Brimline') === '1'
  const sameOrigin = response.type === 'basic' || response.type === 'default'
  const json =
    response.status === 204 || /^application\/(problem\+)?json/.test(response.headers.get('Content-Type') ?? '')
  if (!ours || !sameOrigin || response.redirected || !json) throw new Offline('not-ours')
}

const ProblemBody = z.looseObject({
  code: z.string(),
  status: z.number(),
  title: z.string(),
  detail: z.string().default(''),
  errors: z.array(z.object({ pointer: z.string(), detail: z.string() })).optional(),
})

async function problemOf(response: Response): Promise<Problem> {
  const wait = Number(response.headers.get('Retry-After'))
  const retryAfter = Number.isFinite(wait) && wait > 0 ? wait : undefined
  const parsed = ProblemBody.safeParse(await response.json().catch(() => null))
  if (parsed.success) return new Problem({ ...parsed.data, retryAfter })
  return new Problem({
    code: 'internal',
    status: response.status,
    title: '',
    detail: '',
    retryAfter,
  })
}

/**
 * Makes one call of the API and parses its answer by the contract.
 *
 * @throws {Problem} when the server refused, with its code, sentence and field errors
 * @throws {Offline} when no believable answer came
 */
export async function call<P extends z.ZodType, Q extends z.ZodType, B extends z.ZodType, A extends z.ZodType>(
  contract: Contract<P, Q, B, A>,
  parts: CallParts<P, Q, B> = {},
): Promise<z.output<A>> {
  const url = urlOf(
    contract.path,
    parts.params as Record<string, unknown> | undefined,
    parts.query as Record<string, unknown> | undefined,
  )
  const headers: Record<string, string> = { Accept: 'application/json', 'X-Brimline': '1' }
  const init: RequestInit = { method: contract.method, headers, credentials: 'same-origin', redirect: 'follow' }
  if (parts.body !== undefined) {
    headers['Content-Type'] = 'application/json'
    init.body = JSON.stringify(parts.body)
  }
  const response = await send(url, init, parts.signal)
  believe(response)
  for (const listener of listeners) listener.reply?.()
  if (!response.ok) {
    const problem = await problemOf(response)
    if (problem.code === 'not-signed-in') for (const listener of listeners) listener.signedOut?.()
    throw problem
  }
  if (response.status === 204) return undefined as z.output<A>
  return contract.answer.parse(await response.json())
}
