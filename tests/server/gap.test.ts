import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { Bin } from '#shared/contracts/bins.ts'
import type { Item, Room, Supplier } from '#shared/contracts/catalogue.ts'
import type { GapAhead, Order, Today } from '#shared/contracts/replenishment.ts'
import { startTestApp, type Caller, type TestApp } from '../support/app.ts'
import { makeBin, makeItem, makeRoom, makeSupplier, operation, sync } from '../support/factories.ts'

let app: TestApp
let coordinator: Caller
let room: Room
let supplier: Supplier
let item: Item
let usual: Bin
let vital: Bin
let small: Bin
let plenty: Bin

const at = async (iso: string): Promise<void> => {
  app.clock.set(new Date(iso))
  coordinator = await app.as('coordinator')
}
const gapsOf = async (query = ''): Promise<GapAhead[]> =>
  (await coordinator.get(`/worklist/gap${query}`)).body.items as GapAhead[]

/** Two a day are used, found by a count each morning from 2 to 14 December. */
async function counted(starts: [Bin, number][]): Promise<void> {
  for (let day = 2; day <= 14; day += 1) {
    await at(`2026-12-${String(day).padStart(2, '0')}T09:00:00Z`)
    const found = starts.map(([bin, start]) =>
      operation(app, { type: 'count', binId: bin.id, quantity: start - 2 * (day - 2) }),
    )
    await sync(app, coordinator, found)
  }
  await app.runJobs()
}

beforeAll(async () => {
  app = await startTestApp()
  coordinator = await app.as('coordinator')
  room = await makeRoom(app)
  supplier = await makeSupplier(app, { name: 'Central stores' })
  item = await makeItem(app, { supplierId: supplier.id, unitsPerOrder: 10 })
  const calendar = (await coordinator.post('/calendars', { name: 'Holidays' })).body as { id: string }
  // In 2026 Christmas Day is a Friday.
  const days = [
    { date: '2026-12-25', name: 'Christmas Day' },
    { date: '2026-12-28', name: 'Day in place of 26 December' },
  ]
  await coordinator.patch(`/calendars/${calendar.id}`, { days })
  await (await app.as('administrator')).patch('/hospital', { calendarId: calendar.id })
  usual = await makeBin(app, { roomId: room.id, itemId: item.id })
  small = await makeBin(app, { roomId: room.id, itemId: item.id, capacity: 30 })
  plenty = await makeBin(app, { roomId: room.id, itemId: item.id })
  vital = await makeBin(app, {
    roomId: room.id,
    itemId: (await makeItem(app, { supplierId: supplier.id, unitsPerOrder: 10, ved: 'V' })).id,
  })
  await counted([
    [usual, 50],
    [vital, 50],
    [small, 44],
    [plenty, 300],
  ])
}, 90_000)
afterAll(() => app.close())

describe('before a holiday', () => {
  it('lists what would not last, spread over the orders that are left', async () => {
    expect((await (await app.as('nurse')).get('/worklist/gap')).status).toBe(403)
    expect((await coordinator.get('/worklist/gap?supplierId=none')).status).toBe(422)
    const [ahead, ...more] = await gapsOf(`?supplierId=${supplier.id}`)
    expect(more).toEqual([])
    // Thursday's goods are the last; the next ones come on Tuesday.
    expect(ahead!.gap).toMatchObject({
      supplierName: 'Central stores',
      name: 'Christmas Day',
      from: '2026-12-25',
      to: '2026-12-28',
      lastOrderBy: '2026-12-23T10:00:00.000Z',
      lastArrival: '2026-12-24T14:00:00.000Z',
      nextArrival: '2026-12-29T14:00:00.000Z',
    })
    const orders = ahead!.slots.map((s) => [s.orderBy.slice(8, 10), s.arrives.slice(8, 10)].join('→'))
    expect(orders).toEqual(['14→15', '15→16', '16→17', '17→18', '18→21', '21→22', '22→23', '23→24'])
    // The vital place goes first; what its shelf cannot take now waits for the last order.
    expect(ahead!.slots.map((s) => s.rows.map((r) => r.binId))).toEqual([
      [vital.id],
      [usual.id],
      ...[[], [], [], [], []],
      [small.id],
    ])
  })

  it('says what should stand there, as on the gauge, and orders no more than that', async () => {
    const rows = (await gapsOf())[0]!.slots.flatMap((s) => s.rows)
    for (const row of rows) {
      const bin = (await coordinator.get(`/bins/${row.binId}`)).body as Bin
      expect(row.needed).toBe(bin.gap!.level)
      // Fifteen days at two a day, and something for bad stretches.
      expect(row.needed).toBeGreaterThan(30)
      expect(row.needed).toBeGreaterThan(bin.reorderPoint!)
      expect(row.position).toBeLessThanOrEqual(row.needed)
    }
    const rowOf = (bin: Bin) => rows.find((r) => r.binId === bin.id)!
    const { suggested, needed, position } = rowOf(usual)
    expect(suggested.units - (needed - position)).toBeGreaterThanOrEqual(0)
    expect(suggested.units - (needed - position)).toBeLessThan(suggested.packSize)
    // 20 there and room for 30: one pack, whatever is needed.
    expect(rowOf(small)).toMatchObject({ suggested: { packs: 1 }, shelfTooSmall: true })
    expect(rowOf(usual).shelfTooSmall).toBe(false)
  })

  it('stands on today, with the calendar that knows nothing of next year', async () => {
    const today = async (): Promise<NonNullable<Today['coordinator']>> =>
      (await coordinator.get('/today')).body.coordinator
    expect(await today()).toMatchObject({
      gaps: [{ supplierName: 'Central stores', name: 'Christmas Day', from: '2026-12-25', places: 3 }],
      calendars: [{ name: 'Holidays', emptyYear: 2027 }],
      asked: 0,
    })
    const { problems } = (await (await app.as('administrator')).get('/today')).body.administrator
    expect(problems).toMatchObject([{ what: expect.stringContaining('2027'), to: expect.stringMatching(/calendars/) }])
    const lines = [{ binId: vital.id, packs: 2 }]
    const order = (await coordinator.post('/orders', { supplierId: supplier.id, lines })).body as Order
    expect((await today()).gaps[0]!.places).toBe(2)
    const first = (await gapsOf())[0]!.slots[0]!.rows[0]!
    expect(first).toMatchObject({ binId: vital.id, inDraft: { orderId: order.id } })
    await coordinator.post(`/orders/${order.id}/cancel`, {})
  })

  it('is over with its last order, and begins ten days before', async () => {
    await at('2026-12-23T10:00:00Z')
    expect((await gapsOf())[0]!.slots.map((s) => s.orderBy)).toEqual(['2026-12-23T10:00:00.000Z'])
    await at('2026-12-23T10:00:01Z')
    expect(await gapsOf()).toEqual([])
    await at('2026-12-13T09:00:00Z')
    expect(await gapsOf()).toEqual([])
  })
})
