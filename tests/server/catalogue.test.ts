import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { parseShelfCode } from '#shared/barcode/shelf-code.ts'
import type { Bin } from '#shared/contracts/bins.ts'
import type { Item, Room } from '#shared/contracts/catalogue.ts'
import type { RoomLevels } from '#shared/contracts/room-levels.ts'
import { startTestApp, type Caller, type TestApp } from '../support/app.ts'
import { makeBin, makeItem, makeRoom, makeSupplier, operation, sync } from '../support/factories.ts'

let app: TestApp
let coordinator: Caller
let room: Room
let item: Item

beforeAll(async () => {
  app = await startTestApp()
  coordinator = await app.as('coordinator')
  room = await makeRoom(app)
  item = await makeItem(app)
})
afterAll(() => app.close())

const pointer = (reply: { status: number; body: { errors?: { pointer: string }[] } }) => [
  reply.status,
  reply.body.errors?.[0]?.pointer,
]

describe('bins', () => {
  it('get a label code nobody had, or the one on the label', async () => {
    const bin = await makeBin(app, { roomId: room.id, itemId: item.id })
    expect(parseShelfCode(bin.code).ok).toBe(true)
    expect(bin.display).toBe(`${bin.code.slice(0, 4)}-${bin.code.slice(4)}`)
    const given = await coordinator.post('/bins', { roomId: room.id, itemId: item.id, code: 'u7k2-m4q9' })
    expect(given.body.code).toBe('U7K2M4Q9')
    const body = { roomId: room.id, itemId: item.id }
    expect(pointer(await coordinator.post('/bins', { ...body, code: 'U7K2-M4Q9' }))).toEqual([422, '/code'])
    expect(pointer(await coordinator.post('/bins', { ...body, code: 'U7K2-M4Q8' }))).toEqual([422, '/code'])
    const found = (await coordinator.get('/bins?code=u7k2-m4q9')).body
    expect(found.items.map((b: Bin) => b.id)).toEqual([given.body.id])
  })

  it('add the stock of their overflow places, which have no policy of their own', async () => {
    const main = await makeBin(app, { roomId: room.id, itemId: item.id, enteredReorderPoint: 12, enteredPar: 30 })
    const more = await makeBin(app, { roomId: room.id, itemId: item.id, overflowOf: main.id })
    await sync(app, coordinator, [
      operation(app, { type: 'count', binId: main.id, quantity: 5 }),
      operation(app, { type: 'count', binId: more.id, quantity: 20 }),
    ])
    expect((await coordinator.get(`/bins/${main.id}`)).body).toMatchObject({
      onHand: 25,
      position: 25,
      states: expect.arrayContaining(['ok']),
    })
    expect((await coordinator.get(`/bins/${more.id}`)).body).toMatchObject({
      onHand: 20,
      reorderPoint: null,
      under: 0,
      overflowOf: main.id,
    })
    const nested = await coordinator.post('/bins', { roomId: room.id, itemId: item.id, overflowOf: more.id })
    expect(pointer(nested)).toEqual([422, '/overflowOf'])
    expect((await coordinator.patch(`/bins/${main.id}`, { retired: true })).body.code).toBe('in-use')
    const other = await makeItem(app)
    expect((await coordinator.patch(`/bins/${main.id}`, { itemId: other.id })).body.code).toBe('in-use')
    const upside = { roomId: room.id, itemId: item.id, enteredReorderPoint: 50, enteredPar: 10 }
    expect(pointer(await coordinator.post('/bins', upside))).toEqual([422, '/enteredPar'])
  })

  it('are found by name, item code and label, and by state', async () => {
    const named = await makeItem(app, { name: 'Suction catheter 14 Ch', code: 'SUC-14' })
    const bin = await makeBin(app, { roomId: room.id, itemId: named.id })
    for (const q of ['catheter 14', 'SUC-14', bin.display]) {
      expect(
        (await coordinator.get(`/bins?q=${encodeURIComponent(q)}`)).body.items.map((b: Bin) => b.id),
        q,
      ).toEqual([bin.id])
    }
    expect((await coordinator.get('/bins?q=100%25')).body.total).toBe(0)
    const never = (await coordinator.get('/bins?state=never-counted&pageSize=500')).body.items as Bin[]
    expect(never.every((b) => b.lastCount === null && b.states.includes('never-counted'))).toBe(true)
    expect(never.map((b) => b.id)).toContain(bin.id)
    expect((await coordinator.get('/bins?state=tidy')).status).toBe(422)
  })

  it('move between rooms and retire, and nothing is deleted', async () => {
    const other = await makeRoom(app)
    const bin = await makeBin(app, { roomId: room.id, itemId: item.id })
    await sync(app, coordinator, [operation(app, { type: 'count', binId: bin.id, quantity: 7 })])
    expect((await coordinator.patch(`/bins/${bin.id}`, { roomId: other.id })).body).toMatchObject({
      roomId: other.id,
      onHand: 7,
    })
    expect((await coordinator.patch(`/bins/${bin.id}`, { retired: true })).body.retired).toBe(true)
    expect((await coordinator.get(`/bins?roomId=${other.id}`)).body.total).toBe(0)
    expect((await coordinator.get(`/bins?roomId=${other.id}&retired=yes`)).body.total).toBe(1)
    expect((await coordinator.get(`/bins/${bin.id}/movements`)).body.total).toBe(1)
  })
})

describe('items', () => {
  it('refuse a wrong check digit, an unknown field and a unit that counts were made in', async () => {
    expect(
      pointer(await coordinator.patch(`/items/${item.id}`, { gtins: [{ gtin: '09524321000018', level: 'each' }] })),
    ).toEqual([422, '/gtins/0/gtin'])
    const good = await coordinator.patch(`/items/${item.id}`, { gtins: [{ gtin: '9524321000019', level: 'pack' }] })
    expect(good.body.gtins).toEqual([{ gtin: '09524321000019', level: 'pack' }])
    expect(pointer(await coordinator.patch(`/items/${item.id}`, { colour: 'red' }))).toEqual([422, '/colour'])
    expect(pointer(await coordinator.patch(`/items/${item.id}`, { unitOfUse: 'pair' }))).toEqual([422, '/unitOfUse'])
    expect(pointer(await coordinator.post('/items', { ...good.body, id: undefined }))[0]).toBe(422)
  })

  it('look alike both ways', async () => {
    const twin = await makeItem(app, { lookalikeIds: [item.id] })
    expect((await coordinator.get(`/items/${item.id}`)).body.lookalikeIds).toEqual([twin.id])
    expect(pointer(await coordinator.patch(`/items/${item.id}`, { lookalikeIds: [item.id] }))).toEqual([
      422,
      '/lookalikeIds/0',
    ])
  })

  it('keep the pack an order was written in', async () => {
    const supplier = await makeSupplier(app)
    const boxed = await makeItem(app, { supplierId: supplier.id, unitsPerOrder: 50 })
    const bin = await makeBin(app, { roomId: room.id, itemId: boxed.id })
    const order = (await coordinator.post('/orders', { supplierId: supplier.id, lines: [{ binId: bin.id, packs: 2 }] }))
      .body
    await coordinator.patch(`/items/${boxed.id}`, { unitsPerOrder: 25 })
    expect((await coordinator.get(`/orders/${order.id}`)).body.lines).toMatchObject([
      { packs: 2, packSize: 50, units: 100 },
    ])
    expect((await coordinator.get(`/bins/${bin.id}`)).body.packSize).toBe(25)
  })

  it('cannot retire while a place holds them', async () => {
    expect((await coordinator.patch(`/items/${item.id}`, { retired: true })).body.code).toBe('in-use')
  })
})

describe('places and suppliers', () => {
  it('say at its field what is taken or missing', async () => {
    const ward = (await coordinator.get('/wards')).body.items[0]
    expect(pointer(await coordinator.post('/wards', { code: ward.code, name: 'Again', kind: 'general' }))).toEqual([
      422,
      '/code',
    ])
    expect(
      pointer(await coordinator.post('/rooms', { code: 'X1', name: 'X', wardId: '999999', countEveryDays: 1 })),
    ).toEqual([422, '/wardId'])
    expect(pointer(await coordinator.patch(`/rooms/${room.id}`, { countEveryDays: 0 }))).toEqual([
      422,
      '/countEveryDays',
    ])
    expect((await coordinator.patch(`/rooms/${room.id}`, { retired: true })).body.code).toBe('in-use')
    expect((await coordinator.patch(`/wards/${room.wardId}`, { retired: true })).body.code).toBe('in-use')
    const supplier = await makeSupplier(app)
    expect(pointer(await coordinator.patch(`/suppliers/${supplier.id}`, { orderDays: '118' }))).toEqual([
      422,
      '/orderDays',
    ])
    expect(pointer(await coordinator.patch(`/suppliers/${supplier.id}`, { cutOff: '25:00' }))).toEqual([422, '/cutOff'])
    expect((await coordinator.patch(`/suppliers/${supplier.id}`, { cutOff: '' })).body.cutOff).toBe('')
  })

  it('count a room’s bins and those below', async () => {
    const own = await makeRoom(app)
    const bin = await makeBin(app, { roomId: own.id, itemId: item.id, enteredReorderPoint: 9, enteredPar: 20 })
    await makeBin(app, { roomId: own.id, itemId: item.id, enteredReorderPoint: 9 })
    await sync(app, coordinator, [operation(app, { type: 'count', binId: bin.id, quantity: 9 })])
    const rooms = (await coordinator.get('/rooms')).body.items as Room[]
    expect(rooms.find((r) => r.id === own.id)).toMatchObject({ bins: 2, below: 1 })
  })
})

describe('the hospital', () => {
  it('is changed by the administrator, inside its own limits', async () => {
    const admin = await app.as('administrator')
    expect((await coordinator.patch('/hospital', { name: 'Elsewhere' })).status).toBe(403)
    expect(pointer(await admin.patch('/hospital', { timeZone: 'Moon/Crater' }))).toEqual([422, '/timeZone'])
    expect(pointer(await admin.patch('/hospital', { floor: 0.97 }))).toEqual([422, '/levels/D'])
    const changed = await admin.patch('/hospital', { binWord: 'place', levels: { V: 0.998, E: 0.98, D: 0.95 } })
    expect(changed.body).toMatchObject({ binWord: 'place', levels: { V: 0.998 } })
    expect((await (await app.as('nurse')).get('/hospital')).body.binWord).toBe('place')
  })
})

describe('how a room is kept', () => {
  let room: Room
  let vital: Bin
  let other: Bin

  /** Ten counts a day apart, each one lower: one a day is used. */
  async function counted(bins: Bin[]): Promise<void> {
    const start = Date.parse('2026-11-02T09:00:00Z')
    for (let day = 0; day < 10; day += 1) {
      app.clock.set(new Date(start + day * 86_400_000))
      const nurse = await app.as('nurse')
      await sync(
        app,
        nurse,
        bins.map((bin) => operation(app, { type: 'count', binId: bin.id, quantity: 30 - day })),
      )
    }
    await app.runJobs()
    coordinator = await app.as('coordinator')
  }
  const inForce = async (bin: Bin): Promise<number> =>
    ((await coordinator.get(`/bins/${bin.id}`)).body as Bin).reorderPoint!

  beforeAll(async () => {
    room = await makeRoom(app, { mode: 'beside' })
    const levels = { roomId: room.id, enteredReorderPoint: 25, enteredPar: 40 }
    vital = await makeBin(app, { ...levels, itemId: (await makeItem(app, { ved: 'V' })).id })
    other = await makeBin(app, { ...levels, itemId: (await makeItem(app, { ved: 'D' })).id })
    await makeBin(app, { ...levels, itemId: item.id })
    await counted([vital, other])
  }, 60_000)

  it('stands side by side with what is worked out, before anybody decides', async () => {
    expect((await coordinator.get('/rooms/999999/levels')).status).toBe(404)
    expect((await (await app.as('nurse')).get(`/rooms/${room.id}/levels`)).status).toBe(403)
    const levels = (await coordinator.get(`/rooms/${room.id}/levels`)).body as RoomLevels
    expect(levels).toMatchObject({ places: 2, rise: 0, fall: 2, vital: 1, entered: 1 })
    // The vital item has the higher aim, so its level falls less; the wider difference stands first.
    expect(levels.rows.map((r) => [r.bin.id, r.entered, r.waitsForReviewer])).toEqual([
      [other.id, 25, false],
      [vital.id, 25, true],
    ])
    expect(levels.rows[0]!.difference).toBe(levels.rows[0]!.calculated - 25)
    expect(levels.rows[0]!.difference).toBeLessThan(levels.rows[1]!.difference)
  })

  it('is moved by a coordinator, the vital items by the reviewer alone', async () => {
    const at = `/rooms/${room.id}/mode`
    expect((await coordinator.post('/rooms/999999/mode', { mode: 'calculated' })).status).toBe(404)
    expect((await (await app.as('nurse')).post(at, { mode: 'calculated' })).status).toBe(403)
    expect(pointer(await coordinator.post(at, { mode: 'tidy' }))).toEqual([422, '/mode'])
    for (const _again of [1, 2]) {
      expect((await coordinator.post(at, { mode: 'calculated' })).body.room.mode).toBe('calculated')
      await app.runJobs()
      expect(await inForce(other)).toBeLessThan(25)
      expect(await inForce(vital)).toBe(25)
    }
    const reviewer = await app.as('reviewer')
    expect((await reviewer.post(at, { mode: 'calculated', reason: 'Looked at together.' })).body.vital).toBe(1)
    await app.runJobs()
    expect(await inForce(vital)).toBeLessThan(25)
    expect((await reviewer.get(`/rooms/${room.id}/levels`)).body.vital).toBe(0)
    expect((await coordinator.patch(`/rooms/${room.id}`, { mode: 'as-before' })).body.mode).toBe('as-before')
    await app.runJobs()
    expect([await inForce(vital), await inForce(other)]).toEqual([25, 25])
  })
})
