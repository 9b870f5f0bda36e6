import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { z } from 'zod'
import { contract } from '#shared/contracts/contract.ts'
import { readSession, signOut } from '#shared/contracts/people.ts'
import { Problem } from '#shared/kernel/problem.ts'
import { problemWords } from '#src/i18n/en.ts'
import { call, Offline, onContact, urlOf } from '#src/services/api.ts'

const write = contract({
  method: 'PATCH',
  path: '/things/:id',
  summary: '',
  allow: 'anyone',
  params: z.object({ id: z.string() }),
  body: z.object({ name: z.string() }),
  answer: z.object({ name: z.string() }),
})
const marked = { 'X-Brimline': '1' }
const json = (body: unknown, init: { status?: number; headers?: Record<string, string> } = {}): Response =>
  new Response(JSON.stringify(body), {
    status: init.status ?? 200,
    headers: { 'Content-Type': 'application/json', ...marked, ...init.headers },
  })
const refusal = (status: number, body: object, headers = {}): Response =>
  json(body, { status, headers: { 'Content-Type': 'application/problem+json', ...headers } })
const fetching = vi.fn<typeof fetch>()

beforeEach(() => {
  fetching.mockReset()
  vi.stubGlobal('fetch', fetching)
})
afterEach(() => vi.unstubAllGlobals())

describe('call', () => {
  it('fills the path, sends the marker and the body as JSON, and parses the answer', async () => {
    fetching.mockResolvedValue(json({ name: 'kept', later: 'a newer server may add fields' }))
    expect(await call(write, { params: { id: '7/8' }, body: { name: 'new' } })).toEqual({ name: 'kept' })
    const [url, init] = fetching.mock.calls[0] as [string, RequestInit]
    expect(url).toBe('/api/v1/things/7%2F8')
    expect(init).toMatchObject({ method: 'PATCH', body: '{"name":"new"}', credentials: 'same-origin' })
    expect(init.headers).toMatchObject({ 'X-Brimline': '1', 'Content-Type': 'application/json' })
  })

  it('leaves empty query values out', () => {
    expect(urlOf('/bins', {}, { roomId: '3', q: '', page: 2, state: undefined })).toBe('/api/v1/bins?roomId=3&page=2')
  })

  it('rebuilds the problem with its field errors and the wait', async () => {
    fetching.mockResolvedValue(
      refusal(
        422,
        {
          code: 'invalid-request',
          status: 422,
          title: 'Check',
          detail: 'No.',
          errors: [{ pointer: '/name', detail: 'cannot be empty' }],
        },
        { 'Retry-After': '30' },
      ),
    )
    const error: unknown = await call(write, { params: { id: '1' }, body: { name: '' } }).catch((e: unknown) => e)
    expect(error).toBeInstanceOf(Problem)
    expect(error).toMatchObject({ code: 'invalid-request', retryAfter: 30, errors: [{ pointer: '/name' }] })
  })

  it('is offline, not a problem, when nothing answers', async () => {
    fetching.mockRejectedValue(new TypeError('Failed to fetch'))
    const error: unknown = await call(readSession).catch((e: unknown) => e)
    expect(error).toBeInstanceOf(Offline)
    expect(problemWords.say(error)).toMatchObject({ offline: true, title: 'No connection' })
  })

  it('does not believe an answer of another program: a portal page, a missing marker, a redirect', async () => {
    const portal = new Response('<html>Welcome</html>', { headers: { 'Content-Type': 'text/html' } })
    const unmarked = new Response('{"user":null}', { headers: { 'Content-Type': 'application/json' } })
    const redirected = json({ user: null })
    Object.defineProperty(redirected, 'redirected', { value: true })
    for (const response of [portal, unmarked, redirected]) {
      fetching.mockResolvedValueOnce(response)
      await expect(call(readSession)).rejects.toMatchObject({ name: 'Offline', reason: 'not-ours' })
    }
  })

  it('answers nothing for an empty reply', async () => {
    fetching.mockResolvedValue(new Response(null, { status: 204, headers: marked }))
    expect(await call(signOut)).toBeUndefined()
  })

  it('passes a cancelled call on as cancelled', async () => {
    const stop = new AbortController()
    fetching.mockImplementation(() => {
      stop.abort()
      return Promise.reject(new DOMException('stopped', 'AbortError'))
    })
    await expect(call(readSession, { signal: stop.signal })).rejects.toMatchObject({ name: 'AbortError' })
  })

  it('tells listeners of replies and of an ended session', async () => {
    const reply = vi.fn()
    const signedOut = vi.fn()
    const stop = onContact({ reply, signedOut })
    fetching.mockResolvedValueOnce(refusal(401, { code: 'not-signed-in', status: 401, title: 'x', detail: 'y' }))
    await call(readSession).catch(() => undefined)
    fetching.mockRejectedValueOnce(new TypeError('Failed to fetch'))
    await call(readSession).catch(() => undefined)
    stop()
    expect([reply.mock.calls.length, signedOut.mock.calls.length]).toEqual([1, 1])
  })
})
