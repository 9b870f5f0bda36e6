import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { leadTimeObservations } from '#server/policy/policy.tables.ts'
import { observeAllLeadTimes } from '#server/replenishment/lead-times.service.ts'
import type { Bin } from '#shared/contracts/bins.ts'
import type { Item, Room, Supplier } from '#shared/contracts/catalogue.ts'
import type { Order } from '#shared/contracts/replenishment.ts'
import { startTestApp, type Caller, type TestApp } from '../support/app.ts'
import { makeBin, makeItem, makeRoom, makeSupplier, operation, sync, type SyncReply } from '../support/factories.ts'

let app: TestApp
let coordinator: Caller
let room: Room
let supplier: Supplier
let item: Item

beforeAll(async () => {
  app = await startTestApp()
  coordinator = await app.as('coordinator')
  room = await makeRoom(app)
  supplier = await makeSupplier(app)
  item = await makeItem(app, { supplierId: supplier.id, unitsPerOrder: 10 })
})
afterAll(() => app.close())

const hours = (n: number): number => n / 24

/** Sent on Monday 2 November at 09:30: on the shelf by Tuesday at 14:00, by the calendar. */
async function sentLine(packs: number): Promise<{ order: Order; line: string; bin: Bin }> {
  app.clock.set(new Date('2026-11-02T09:30:00Z'))
  coordinator = await app.as('coordinator')
  const bin = await makeBin(app, { roomId: room.id, itemId: item.id })
  const draft = (await coordinator.post('/orders', { supplierId: supplier.id, lines: [{ binId: bin.id, packs }] }))
    .body as Order
  const order = (await coordinator.post(`/orders/${draft.id}/send`)).body as Order
  return { order, line: order.lines[0]!.id, bin }
}

/** Entries of one phone at a moment, taken in. @returns their ids */
async function entered(iso: string, ...fields: Record<string, unknown>[]): Promise<string[]> {
  app.clock.set(new Date(iso))
  coordinator = await app.as('coordinator')
  const items = fields.map((f) => operation(app, f))
  const reply = (await sync(app, coordinator, items)).body as SyncReply
  expect(reply.results.every((r) => r.status.startsWith('accepted'))).toBe(true)
  return items.map((one) => String(one.opId))
}

async function observed(line: string) {
  const rows = await app.database.db.select().from(leadTimeObservations)
  return rows.find((row) => row.orderLineId === Number(line)) ?? null
}

describe('the time a delivery took', () => {
  it('is kept once nine tenths are there, and follows what is taken back or cancelled', async () => {
    const { order, line, bin } = await sentLine(3)
    const putAway = { type: 'receipt', binId: bin.id, orderLineId: line }
    await entered('2026-11-03T15:00:00Z', { ...putAway, quantity: 20 })
    expect(await observed(line)).toBeNull()
    const [second] = await entered('2026-11-04T15:00:00Z', { ...putAway, quantity: 8 })
    const row = (await observed(line))!
    expect(row).toMatchObject({ supplierId: Number(supplier.id), itemId: Number(item.id) })
    expect(row.arrivedAt.toISOString()).toBe('2026-11-04T15:00:00.000Z')
    expect(row.days).toBeCloseTo(hours(53.5), 9)
    expect(row.delayDays).toBeCloseTo(hours(25), 9)
    await entered('2026-11-04T16:00:00Z', { type: 'movement.withdraw', binId: bin.id, targetOpId: second })
    expect(await observed(line)).toBeNull()
    await coordinator.post(`/orders/${order.id}/cancel`, { reason: 'The rest is not coming.' })
    expect((await observed(line))!.delayDays).toBeCloseTo(hours(1), 9)
    const seen = ((await coordinator.get('/suppliers')).body.items as Supplier[]).find(
      (s) => s.id === supplier.id,
    )!.seen
    expect(seen.deliveries).toBe(1)
    expect(seen.delayDays).toBeCloseTo(hours(1), 9)
  })

  it('is not taken from what the question about a rise wrote, but from an arrival', async () => {
    const { line, bin } = await sentLine(1)
    const at = '2026-11-06T10:00:00Z'
    await entered(
      at,
      { type: 'receipt', binId: bin.id, orderLineId: line, quantity: 10 },
      { type: 'count', binId: bin.id, quantity: 14, basis: { question: 'rise', answer: 'put-away' } },
    )
    expect(await observed(line)).toBeNull()
    await entered('2026-11-06T11:00:00Z', {
      type: 'arrival',
      binId: bin.id,
      orderLineId: line,
      quantity: 10,
      observedAt: '2026-11-03T12:00:00.000Z',
      observedSource: 'typed-sheet',
    })
    // Two hours before the stated time.
    expect((await observed(line))!.delayDays).toBeCloseTo(hours(-2), 9)
  })

  it('is worked out anew for a whole history, by the closed days that hold', async () => {
    const { line, bin } = await sentLine(1)
    await entered('2026-11-04T14:00:00Z', { type: 'receipt', binId: bin.id, orderLineId: line, quantity: 10 })
    expect((await observed(line))!.delayDays).toBeCloseTo(1, 9)
    const calendar = (await coordinator.post('/calendars', { name: 'Stocktaking' })).body as { id: string }
    await coordinator.patch(`/calendars/${calendar.id}`, { days: [{ date: '2026-11-03', name: 'Stocktaking' }] })
    await coordinator.patch(`/suppliers/${supplier.id}`, { calendarId: calendar.id })
    const before = (await app.database.db.select().from(leadTimeObservations)).length
    for (const _again of [1, 2]) await observeAllLeadTimes(app.database.db)
    expect((await observed(line))!.delayDays).toBeCloseTo(0, 9)
    expect((await app.database.db.select().from(leadTimeObservations)).length).toBe(before)
  })
})
