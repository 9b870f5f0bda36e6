import 'fake-indexeddb/auto'
import { readFileSync } from 'node:fs'
import { IDBFactory } from 'fake-indexeddb'
import { uuidv7 } from 'uuidv7'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { APP_VERSION } from '#src/services/app-version.ts'
import { asClock, forgetDevice } from '#src/services/device.ts'
import { closeDb, withDb } from '#src/services/offline-db.ts'
import { changeEntries, entriesOf, saveEntries, type NewEntry } from '#src/services/outbox.ts'
import { syncPass, takeBatch, type PassEnd } from '#src/services/sync-pass.ts'
import { backoff, passDeps } from '#src/services/sync.ts'

const T0 = Date.UTC(2026, 11, 1, 9)
type Item = Record<string, unknown> & { opId: string; quantity?: number }
type Reply = (items: Item[]) => Response | Promise<Response>

const entry = (quantity: number, more: Partial<NewEntry['op']> = {}): NewEntry => ({
  userId: '4',
  initials: 'M.O.',
  op: { opId: uuidv7(), type: 'count', binId: '9', quantity, ...more } as NewEntry['op'],
  label: { roomId: '1', binId: '9', binDisplay: 'U7K2-M4Q9', itemName: 'Gauze swab', unit: 'each' },
})

const json = (body: unknown, status = 200, headers: Record<string, string> = {}): Response =>
  new Response(JSON.stringify(body), {
    status,
    headers: {
      'Content-Type': status < 300 ? 'application/json' : 'application/problem+json',
      'X-Brimline': '1',
      ...headers,
    },
  })
const answer = (results: unknown[]): Response =>
  json({ serverTime: new Date(T0 + 5_000).toISOString(), authzVersion: 3, results })
const accept: Reply = (items) => answer(items.map(({ opId }) => ({ opId, status: 'accepted' })))
const refuse =
  (status: number, code = 'some-code', headers: Record<string, string> = {}): Reply =>
  () =>
    json({ type: `/problems/${code}`, title: 'No', detail: 'No.', status, code }, status, headers)

let posts: Item[][] = []
let ready = true
const refreshSession = vi.fn(() => Promise.resolve())
const onAuthzVersion = vi.fn()

/** One pass against a server that answers by the list, its last entry again and again. */
async function run(...replies: Reply[]): Promise<PassEnd> {
  posts = []
  vi.stubGlobal('fetch', (url: string, init?: RequestInit) => {
    if (url === '/readyz') return Promise.resolve(ready ? json({}) : new Response('', { status: 503 }))
    const { items } = JSON.parse(init?.body as string) as { items: Item[] }
    posts.push(items)
    return Promise.resolve((replies[Math.min(posts.length, replies.length) - 1] as Reply)(items))
  })
  const deps = passDeps(
    '4',
    { userId: () => '4', refreshSession, onAuthzVersion, onState: () => undefined },
    AbortSignal.timeout(20_000),
  )
  const attention = async () =>
    new Set((await entriesOf('4')).filter((e) => e.state === 'attention').map((e) => e.opId))
  return syncPass(deps, attention)
}
const states = async (): Promise<string[]> => (await entriesOf('4')).map((e) => `${String(e.op.quantity)} ${e.state}`)

beforeEach(async () => {
  await closeDb()
  forgetDevice()
  ready = true
  vi.clearAllMocks()
  globalThis.indexedDB = new IDBFactory()
})
afterEach(() => vi.unstubAllGlobals())

describe('replies to a batch', () => {
  it('closes what is named as accepted, keeps what is missing, puts aside what is refused', async () => {
    await saveEntries([entry(1), entry(2), entry(3), entry(4), entry(5)], T0)
    const end = await run((items) =>
      answer([
        { opId: items[0]?.opId, status: 'accepted' },
        { opId: items[1]?.opId, status: 'duplicate' },
        { opId: items[2]?.opId, status: 'rejected', code: 'unknown-bin', message: 'No such bin.', fixable: true },
        { opId: items[3]?.opId, status: 'retry' },
        { opId: uuidv7(), status: 'accepted' },
      ]),
    )
    expect(end.kind).toBe('wait')
    expect(posts).toHaveLength(1)
    expect(await states()).toEqual(['1 acked', '2 acked', '3 attention', '4 queued', '5 queued'])
    expect((await entriesOf('4'))[2]?.reply).toMatchObject({
      code: 'unknown-bin',
      message: 'No such bin.',
      fixable: true,
    })
  })

  it('learns the time and the version of rights from an answer', async () => {
    await saveEntries([entry(1)], T0)
    expect(await run(accept)).toEqual({ kind: 'done', sent: 1 })
    expect(onAuthzVersion).toHaveBeenCalledWith(3)
    const clock = asClock(await withDb((db) => db.get('meta', 'clock')))
    expect(clock.lastContact).toBe(T0 + 5_000)
  })

  it.each<[string, Reply, PassEnd['kind']]>([
    ['no network', () => Promise.reject(new TypeError('Failed to fetch')), 'wait'],
    [
      'a page of a captive portal',
      () => new Response('<html>', { headers: { 'Content-Type': 'text/html' } }),
      'portal',
    ],
    [
      'JSON without our marker',
      () => new Response('{}', { headers: { 'Content-Type': 'application/json' } }),
      'portal',
    ],
    ['an empty 200', () => new Response('', { headers: { 'X-Brimline': '1' } }), 'portal'],
    [
      'an answer that breaks off',
      () => new Response('{"serverTi', { headers: { 'Content-Type': 'application/json', 'X-Brimline': '1' } }),
      'wait',
    ],
    ['an answer of another shape', () => json({ ok: true }), 'wait'],
    ['401', refuse(401, 'not-signed-in'), 'signed-out'],
    ['409 owner-mismatch', refuse(409, 'owner-mismatch'), 'other-person'],
    ['426', refuse(426, 'too-old'), 'update'],
    ['408', refuse(408), 'wait'],
    ['425', refuse(425), 'wait'],
    ['429', refuse(429), 'wait'],
    ['503', refuse(503, 'not-ready'), 'wait'],
    ['a first 500', refuse(500, 'internal'), 'wait'],
  ])('keeps everything after %s', async (_name, reply, kind) => {
    await saveEntries([entry(1), entry(2)], T0)
    expect((await run(reply)).kind).toBe(kind)
    expect(posts).toHaveLength(1)
    expect(await states()).toEqual(['1 queued', '2 queued'])
  })

  it('honours Retry-After', async () => {
    await saveEntries([entry(1)], T0)
    expect(await run(refuse(429, 'slow-down', { 'Retry-After': '7' }))).toMatchObject({ retryAfterMs: 7_000 })
  })

  it('asks who is signed in once after a 403, then leaves the decision to the person', async () => {
    await saveEntries([entry(1)], T0)
    await run(refuse(403, 'not-allowed'), accept)
    expect(refreshSession).toHaveBeenCalledTimes(1)
    expect(await states()).toEqual(['1 acked'])
    await saveEntries([entry(2)], T0)
    await run(refuse(403, 'not-allowed'))
    expect(posts).toHaveLength(2)
    expect(await states()).toEqual(['1 acked', '2 attention'])
  })

  it.each([400, 413, 415, 422])('halves a batch refused with %i until only the bad entry is left', async (status) => {
    await saveEntries(
      [1, 2, 3, 4, 5].map((n) => entry(n)),
      T0,
    )
    const end = await run(
      (items) => (items.some((i) => i.quantity === 4) ? refuse(status)(items) : accept(items)) as Response,
    )
    expect(end.kind).toBe('done')
    expect(await states()).toEqual(['1 acked', '2 acked', '3 acked', '4 attention', '5 acked'])
  })

  it('finds the entry that breaks the server after two faults, but blames none while the server is down', async () => {
    await saveEntries([entry(1), entry(2), entry(3)], T0)
    const poison: Reply = (items) =>
      items.some((i) => i.quantity === 2) ? refuse(500, 'internal')(items) : accept(items)
    await run(poison)
    ready = false
    await run(poison)
    expect(await states()).toEqual(['1 queued', '2 queued', '3 queued'])
    ready = true
    for (let i = 0; i < 8; i += 1) await run(poison)
    expect(await states()).toEqual(['1 acked', '2 attention', '3 acked'])
  })

  it('lets an entry wait that names one a person has to decide about', async () => {
    const first = entry(1)
    await saveEntries([first], T0)
    await changeEntries(new Map([[first.op.opId, { state: 'attention' }]]))
    await saveEntries([entry(2, { type: 'count.correct', targetOpId: first.op.opId } as never), entry(3)], T0)
    await run(accept)
    expect(await states()).toEqual(['1 attention', '2 queued', '3 acked'])
  })

  it('sends in the order made, at most 100 entries and 60 KB at a time, byte for byte what was saved', async () => {
    const many = Array.from({ length: 230 }, (_, i) => entry(i))
    const saved = await saveEntries(many, T0)
    await run(accept)
    expect(posts.map((items) => items.length)).toEqual([100, 100, 30])
    expect(posts.flat()).toEqual(saved.map((e) => e.op))
    const long = await saveEntries(
      Array.from({ length: 20 }, (_, i) => entry(i, { note: 'x'.repeat(9_000) })),
      T0,
    )
    expect(takeBatch(long)).toHaveLength(6)
  })
})

describe('backoff', () => {
  it('stays between 0 and five minutes and doubles at first', () => {
    expect([0, 1, 2].map((n) => backoff(n, () => 1))).toEqual([2_000, 4_000, 8_000])
    expect(backoff(50, () => 1)).toBe(300_000)
    expect(backoff(5, () => 0)).toBe(0)
  })
})

it('names the version of package.json', () => {
  const file = JSON.parse(readFileSync('package.json', 'utf8')) as {
    version: string
  }
  expect(APP_VERSION).toBe(file.version)
})
