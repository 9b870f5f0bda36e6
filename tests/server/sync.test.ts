import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { count } from 'drizzle-orm'
import { auditLog } from '#server/audit/audit.tables.ts'
import { movements, operations, quarantine } from '#server/counts/counts.tables.ts'
import type { Bin } from '#shared/contracts/bins.ts'
import type { Item, Room } from '#shared/contracts/catalogue.ts'
import { startTestApp, password, type Caller, type TestApp } from '../support/app.ts'
import { makeBin, makeItem, makeRoom, operation, sync, type SyncReply } from '../support/factories.ts'

let app: TestApp
let nurse: Caller
let room: Room
let item: Item
let bin: Bin

beforeAll(async () => {
  app = await startTestApp()
  nurse = await app.as('nurse')
  room = await makeRoom(app)
  item = await makeItem(app, { unitsPerOrder: 10 })
  bin = await makeBin(app, { roomId: room.id, itemId: item.id, capacity: 60, enteredReorderPoint: 12, enteredPar: 40 })
})
afterAll(() => app.close())

const send = async (
  items: Record<string, unknown>[],
  caller = nurse,
  device = 'phone-1',
): Promise<SyncReply['results']> => {
  const reply = await sync(app, caller, items, device)
  expect(reply.status, reply.text).toBe(200)
  return (reply.body as SyncReply).results
}
const levelOf = async (id = bin.id): Promise<Bin> => (await nurse.get(`/bins/${id}`)).body as Bin
const minutes = (n: number): void => app.clock.set(new Date(app.clock.now().getTime() + n * 60_000))
const rows = async (
  table: typeof movements | typeof operations | typeof auditLog | typeof quarantine,
): Promise<number> => (await app.database.db.select({ n: count() }).from(table))[0]!.n

describe('POST /sync/operations', () => {
  it('takes a count in once, however often and however it is sent', async () => {
    const entry = operation(app, { type: 'count', binId: bin.id, quantity: 14 })
    expect(await send([entry])).toEqual([{ opId: entry.opId, status: 'accepted' }])
    const before = [await rows(movements), await rows(operations), await rows(auditLog)]
    const reordered = Object.fromEntries(Object.entries(entry).reverse())
    expect((await send([entry, reordered])).map((r) => r.status)).toEqual(['duplicate', 'duplicate'])
    const both = await Promise.all([send([entry]), send([entry])])
    expect(both.flat().map((r) => r.status)).toEqual(['duplicate', 'duplicate'])
    expect([await rows(movements), await rows(operations), await rows(auditLog)]).toEqual(before)
    expect(await levelOf()).toMatchObject({ onHand: 14, lastCount: { quantity: 14 }, position: 14, under: 0 })
  })

  it('takes one entry in once from two requests at the same moment', async () => {
    minutes(60)
    const entry = operation(app, { type: 'count', binId: bin.id, quantity: 13 })
    const replies = await Promise.all(Array.from({ length: 6 }, () => send([entry])))
    const statuses = replies
      .flat()
      .map((r) => r.status)
      .sort()
    expect(statuses).toEqual(['accepted', 'duplicate', 'duplicate', 'duplicate', 'duplicate', 'duplicate'])
  })

  it('refuses another entry under a known number and keeps it', async () => {
    const entry = operation(app, { type: 'count', binId: bin.id, quantity: 12 })
    await send([entry])
    const kept = await rows(quarantine)
    expect(await send([{ ...entry, quantity: 21 }])).toMatchObject([{ status: 'rejected', code: 'key-reuse' }])
    const coordinator = await app.as('coordinator')
    expect(await send([entry], coordinator)).toMatchObject([{ status: 'rejected', code: 'key-reuse' }])
    expect(await rows(quarantine)).toBeGreaterThan(kept)
  })

  it('judges each entry of a batch alone', async () => {
    minutes(60)
    const good = operation(app, { type: 'count', binId: bin.id, quantity: 9 })
    const results = await send([
      operation(app, { type: 'count', binId: bin.id, quantity: 1.5 }),
      operation(app, { type: 'count', binId: bin.id, quantity: -1 }),
      operation(app, { type: 'count', binId: bin.id, quantity: 100_000 }),
      operation(app, { type: 'count', binId: bin.id, quantity: 3, role: 'coordinator' }),
      operation(app, { type: 'count', binCode: 'U0000000', quantity: 3 }),
      { nonsense: true },
      operation(app, { type: 'count', binId: bin.id, quantity: 4, v: 999 }),
      good,
    ])
    expect(results.map((r) => r.code ?? r.status)).toEqual([
      'invalid-operation',
      'invalid-operation',
      'invalid-operation',
      'invalid-operation',
      'unknown-bin',
      'invalid-operation',
      'newer-version',
      'accepted',
    ])
    expect(results[0]!.message).toContain('quantity')
    expect((await levelOf()).onHand).toBe(9)
  })

  it('answers 413 to too many and 409 to another person’s entries', async () => {
    const many = Array.from({ length: 101 }, () => operation(app, { type: 'count', binId: bin.id, quantity: 1 }))
    const reply = await sync(
      app,
      nurse,
      many.slice(0, 101).map(({ opId, v, type, binId }) => ({ opId, v, type, binId })),
    )
    expect(reply.status).toBe(413)
    const heavy = await sync(app, nurse, [
      operation(app, { type: 'count', binId: bin.id, quantity: 1, note: 'x'.repeat(70_000) }),
    ])
    expect(heavy.status).toBe(413)
    const other = await nurse.post('/sync/operations', {
      deviceId: 'p',
      userId: app.people.coordinator,
      appVersion: '1',
      sentAt: app.clock.now().toISOString(),
      items: [],
    })
    expect([other.status, other.body.code]).toEqual([409, 'owner-mismatch'])
  })

  it('lets a late count take effect at its own time', async () => {
    // The table of the design: count 20, count 12 in the basement, +24, then the count of 09:00 arrives.
    const place = await makeBin(app, { roomId: room.id, itemId: item.id })
    await send([operation(app, { type: 'count', binId: place.id, quantity: 20 })])
    minutes(60)
    const basement = operation(app, { type: 'count', binId: place.id, quantity: 12 })
    minutes(120)
    await send(
      [operation(app, { type: 'receipt', binId: place.id, quantity: 24 })],
      await app.as('coordinator'),
      'desk',
    )
    expect((await levelOf(place.id)).onHand).toBe(44)
    minutes(180)
    await send([basement])
    expect((await levelOf(place.id)).onHand).toBe(36)
  })

  it('corrects and takes back, keeping every entry', async () => {
    const place = await makeBin(app, { roomId: room.id, itemId: item.id })
    const slip = operation(app, { type: 'count', binId: place.id, quantity: 120 })
    await send([slip])
    const mend = operation(app, { type: 'count.correct', binId: place.id, targetOpId: slip.opId, quantity: 12 })
    await send([mend])
    expect((await levelOf(place.id)).onHand).toBe(12)
    await send([operation(app, { type: 'count.withdraw', binId: place.id, targetOpId: mend.opId })])
    expect((await levelOf(place.id)).onHand).toBe(120)
    await send([operation(app, { type: 'count.withdraw', binId: place.id, targetOpId: slip.opId })])
    expect(await levelOf(place.id)).toMatchObject({ onHand: 0, lastCount: null, states: ['never-counted'] })
    const ledger = (await nurse.get(`/bins/${place.id}/movements`)).body.items as {
      opId: string
      voidedBy: string | null
    }[]
    expect(ledger).toHaveLength(4)
    expect(ledger.find((m) => m.opId === slip.opId)!.voidedBy).not.toBeNull()
  })

  it('waits for an entry whose target has not arrived', async () => {
    const first = operation(app, { type: 'count', binId: bin.id, quantity: 8 })
    const later = operation(app, { type: 'count.withdraw', binId: bin.id, targetOpId: first.opId })
    expect(await send([later])).toMatchObject([{ status: 'retry', code: 'target-missing' }])
    await send([first])
    expect(await send([later])).toMatchObject([{ status: 'accepted' }])
  })

  it('lets only the maker, or a coordinator with a reason, change an entry', async () => {
    const admin = await app.as('administrator')
    await admin.post('/users', {
      name: 'Second Pair',
      email: 'second@tallowmere.example',
      staffCode: 'T-2',
      role: 'nurse',
      roomIds: null,
      password,
    })
    const colleague = await app.signedIn('second@tallowmere.example')
    const entry = operation(app, { type: 'count', binId: bin.id, quantity: 7 })
    await send([entry])
    const change = { type: 'count.correct', binId: bin.id, targetOpId: entry.opId, quantity: 6 }
    expect(await send([operation(app, change)], colleague)).toMatchObject([{ code: 'out-of-scope' }])
    const coordinator = await app.as('coordinator')
    expect(await send([operation(app, change)], coordinator)).toMatchObject([{ code: 'invalid-operation' }])
    expect(await send([operation(app, { ...change, reason: 'misread' })], coordinator)).toMatchObject([
      { status: 'accepted' },
    ])
  })

  it('moves stock between two places in one entry, both or neither', async () => {
    const far = await makeRoom(app)
    const there = await makeBin(app, { roomId: far.id, itemId: item.id })
    minutes(60)
    await send([
      operation(app, { type: 'count', binId: bin.id, quantity: 20 }),
      operation(app, { type: 'count', binId: there.id, quantity: 1 }),
    ])
    const move = operation(app, { type: 'transfer', binId: bin.id, direction: 'out', toRoomId: far.id, quantity: 5 })
    await send([move])
    expect([(await levelOf()).onHand, (await levelOf(there.id)).onHand]).toEqual([15, 6])
    await send([operation(app, { type: 'movement.withdraw', binId: bin.id, targetOpId: move.opId })])
    expect([(await levelOf()).onHand, (await levelOf(there.id)).onHand]).toEqual([20, 1])
  })

  it('flags what a person should look at, and takes it in all the same', async () => {
    minutes(30)
    expect(await send([operation(app, { type: 'count', binId: bin.id, quantity: 55 })])).toMatchObject([
      { status: 'accepted_with_conflict', flags: ['rise-unexplained'] },
    ])
    minutes(30)
    const wild = operation(app, { type: 'count', binId: bin.id, quantity: 54, deviceTime: '2027-06-01T00:00:00.000Z' })
    expect(await send([wild])).toMatchObject([{ status: 'accepted', flags: ['clock-suspect'] }])
    expect((await levelOf()).lastCount!.effectiveAt).toBe(app.clock.now().toISOString())
    expect(await send([operation(app, { type: 'take', binId: bin.id, quantity: 60 })])).toMatchObject([
      { flags: ['below-zero'] },
    ])
    expect(await levelOf()).toMatchObject({ onHand: 0, recordsDisagree: true })
    minutes(60)
    await send([operation(app, { type: 'count', binId: bin.id, quantity: 30 })])
    minutes(30)
    const coordinator = await app.as('coordinator')
    expect(
      await send([operation(app, { type: 'count', binId: bin.id, quantity: 20 })], coordinator, 'desk'),
    ).toMatchObject([{ flags: ['count-differs'] }])
  })

  it('keeps a count of what the place held before with that item', async () => {
    const place = await makeBin(app, { roomId: room.id, itemId: item.id })
    await send([operation(app, { type: 'count', binId: place.id, quantity: 9 })])
    const next = await makeItem(app)
    minutes(10)
    const late = operation(app, { type: 'count', binId: place.id, itemId: item.id, quantity: 8 })
    minutes(10)
    const coordinator = await app.as('coordinator')
    expect((await coordinator.patch(`/bins/${place.id}`, { itemId: next.id })).status).toBe(200)
    expect(await levelOf(place.id)).toMatchObject({
      itemId: next.id,
      onHand: 0,
      lastCount: null,
      states: ['never-counted'],
    })
    expect(await send([late])).toMatchObject([{ status: 'accepted_with_conflict', flags: ['item-changed'] }])
    expect((await levelOf(place.id)).lastCount).toBeNull()
    const stranger = await makeItem(app)
    expect(
      await send([operation(app, { type: 'count', binId: place.id, itemId: stranger.id, quantity: 8 })]),
    ).toMatchObject([{ code: 'item-mismatch' }])
  })

  it('never lets a count of one place move another', async () => {
    const a = await makeBin(app, { roomId: room.id, itemId: item.id })
    const b = await makeBin(app, { roomId: room.id, itemId: item.id })
    await send([
      operation(app, { type: 'count', binId: a.id, quantity: 5 }),
      operation(app, { type: 'count', binId: b.id, quantity: 50 }),
    ])
    minutes(1)
    await send([operation(app, { type: 'count', binId: a.id, quantity: 0 })])
    expect(await levelOf(a.id)).toMatchObject({ onHand: 0, states: expect.arrayContaining(['empty']) })
    expect((await levelOf(b.id)).onHand).toBe(50)
  })

  it('never lets one odd entry take its neighbours down', async () => {
    minutes(60)
    const results = await send([
      operation(app, { type: 'count', binId: bin.id, quantity: 11, localSeq: Date.now() }),
      operation(app, { type: 'flag', binId: bin.id, reason: 'half a \ud800 character' }),
      null as never,
      ['nothing'] as never,
      operation(app, { type: 'take', binId: bin.id, quantity: 1, localSeq: Date.now() + 1 }),
    ])
    const taken = results.map((r) => r.status.startsWith('accepted'))
    expect(taken).toEqual([true, false, false, false, true])
    expect(results.slice(1, 4).map((r) => r.code)).toEqual([
      'invalid-operation',
      'invalid-operation',
      'invalid-operation',
    ])
    expect((await levelOf()).onHand).toBe(10)
  })

  it('keeps an order to its own place, and a correction to its target’s', async () => {
    const coordinator = await app.as('coordinator')
    const here = await makeBin(app, { roomId: room.id, itemId: item.id })
    const far = await makeBin(app, { roomId: (await makeRoom(app)).id, itemId: item.id })
    const made = await coordinator.post('/orders', {
      supplierId: item.supplierId,
      lines: [{ binId: far.id, packs: 1 }],
    })
    const order = (await coordinator.post(`/orders/${made.body.id}/send`, {})).body
    const stray = operation(app, { type: 'receipt', binId: here.id, quantity: 10, orderLineId: order.lines[0].id })
    expect(await send([stray])).toMatchObject([{ code: 'item-mismatch' }])
    const counted = operation(app, { type: 'count', binId: here.id, quantity: 5 })
    await send([counted])
    const about = { type: 'count.correct', targetOpId: counted.opId, quantity: 6 }
    expect(await send([operation(app, { ...about, binId: far.id })])).toMatchObject([{ code: 'invalid-operation' }])
    expect(await send([operation(app, { ...about, binId: '999999' })])).toMatchObject([{ code: 'unknown-bin' }])
    const both = operation(app, { type: 'count', binId: here.id, binCode: far.code, quantity: 5 })
    expect(await send([both])).toMatchObject([{ code: 'invalid-operation' }])
  })

  it('says of an entry whose target was refused that it cannot be', async () => {
    const bad = operation(app, { type: 'count', binCode: 'U0000000', quantity: 3 })
    await send([bad])
    const about = operation(app, { type: 'count.withdraw', binId: bin.id, targetOpId: bad.opId })
    expect(await send([about])).toMatchObject([{ status: 'rejected', code: 'target-refused' }])
    const self = operation(app, { type: 'count.withdraw', binId: bin.id })
    expect(await send([{ ...self, targetOpId: self.opId }])).toMatchObject([{ code: 'invalid-operation' }])
  })

  it('gives back only what is held', async () => {
    const place = await makeBin(app, { roomId: room.id, itemId: item.id })
    const coordinator = await app.as('coordinator')
    const act = async (type: string, quantity: number) =>
      send(
        [operation(app, { type, binId: place.id, quantity, ...(type === 'count' ? {} : { reason: 'wet' }) })],
        coordinator,
        'desk',
      )
    await act('count', 30)
    await act('hold', 5)
    expect(await act('release', 9)).toMatchObject([{ code: 'invalid-operation' }])
    expect(await levelOf(place.id)).toMatchObject({ onHand: 25, held: 5, states: expect.arrayContaining(['held']) })
    await act('release', 5)
    expect(await levelOf(place.id)).toMatchObject({ onHand: 30, held: 0 })
  })

  it('takes stock off the shelf that went to a room without a place for it, and says so', async () => {
    const empty = await makeRoom(app)
    minutes(60)
    await send([operation(app, { type: 'count', binId: bin.id, quantity: 20 })])
    const before = await rows(quarantine)
    await send([operation(app, { type: 'transfer', binId: bin.id, direction: 'out', toRoomId: empty.id, quantity: 4 })])
    expect((await levelOf()).onHand).toBe(16)
    expect(await rows(quarantine)).toBe(before + 1)
  })

  it('flags two counts that differ whichever arrives first', async () => {
    const place = await makeBin(app, { roomId: room.id, itemId: item.id })
    const coordinator = await app.as('coordinator')
    const early = operation(app, { type: 'count', binId: place.id, quantity: 40 })
    minutes(30)
    await send([operation(app, { type: 'count', binId: place.id, quantity: 12 })], coordinator, 'desk')
    minutes(30)
    expect(await send([early])).toMatchObject([{ flags: ['count-differs'] }])
  })

  it('keeps ward staff inside their rooms', async () => {
    const admin = await app.as('administrator')
    const other = await makeRoom(app)
    await admin.post('/users', {
      name: 'Room Bound',
      email: 'bound@tallowmere.example',
      staffCode: 'T-3',
      role: 'nurse',
      roomIds: [other.id],
      password,
    })
    const bound = await app.signedIn('T-3')
    expect(await send([operation(app, { type: 'count', binId: bin.id, quantity: 5 })], bound)).toMatchObject([
      { code: 'out-of-scope' },
    ])
    for (const path of [
      `/bins/${bin.id}`,
      `/bins/${bin.id}/movements`,
      `/bins/${bin.id}/policy`,
      `/sync/snapshot?roomId=${room.id}`,
    ]) {
      expect((await bound.get(path)).status, path).toBe(404)
    }
    expect((await bound.get('/rooms')).body.items.map((r: Room) => r.id)).toEqual([other.id])
    expect((await bound.get('/bins')).body.total).toBe(0)
  })
})

describe('GET /sync/snapshot', () => {
  it('gives the room whole, then only what changed, and what left', async () => {
    const own = await makeRoom(app)
    const a = await makeBin(app, { roomId: own.id, itemId: item.id, enteredReorderPoint: 5, enteredPar: 9 })
    const b = await makeBin(app, { roomId: own.id, itemId: item.id })
    const whole = (await nurse.get(`/sync/snapshot?roomId=${own.id}`)).body
    expect(whole.reset).toBe(true)
    expect(whole.bins.map((x: Bin) => x.id).sort()).toEqual([a.id, b.id].sort())
    expect(whole.items).toMatchObject([{ id: item.id, packSize: 10 }])
    expect(whole.cautions[0]).toMatchObject({ kind: 'vital-policy', text: expect.stringContaining('policy') })
    await send([operation(app, { type: 'count', binId: a.id, quantity: 3 })])
    const delta = (await nurse.get(`/sync/snapshot?roomId=${own.id}&since=${whole.version}`)).body
    expect([delta.reset, delta.bins.map((x: Bin) => x.id)]).toEqual([false, [a.id]])
    const coordinator = await app.as('coordinator')
    await coordinator.patch(`/bins/${b.id}`, { retired: true })
    const gone = (await nurse.get(`/sync/snapshot?roomId=${own.id}&since=${delta.version}`)).body
    expect(gone.tombstones).toEqual([b.id])
    const future = (await nurse.get(`/sync/snapshot?roomId=${own.id}&since=99999`)).body
    expect(future.reset).toBe(true)
  })
})
