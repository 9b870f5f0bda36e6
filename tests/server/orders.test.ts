import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { existsSync, mkdtempSync, readFileSync, readdirSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { sendDue } from '#server/mail/mail.service.ts'
import { fileTransport } from '#server/mail/transport.ts'
import type { Bin } from '#shared/contracts/bins.ts'
import type { Item, Room, Supplier } from '#shared/contracts/catalogue.ts'
import type { Order, WorklistRow } from '#shared/contracts/replenishment.ts'
import { startTestApp, type Caller, type TestApp } from '../support/app.ts'
import { makeBin, makeItem, makeRoom, makeSupplier, operation, sync } from '../support/factories.ts'

let app: TestApp
let coordinator: Caller
let room: Room
let supplier: Supplier
let item: Item
let low: Bin
let fine: Bin

beforeAll(async () => {
  app = await startTestApp()
  coordinator = await app.as('coordinator')
  room = await makeRoom(app)
  supplier = await makeSupplier(app, { name: 'Central stores' })
  item = await makeItem(app, { supplierId: supplier.id, unitsPerOrder: 10, name: 'IV cannula 20 G' })
  low = await makeBin(app, { roomId: room.id, itemId: item.id, capacity: 60, enteredReorderPoint: 12, enteredPar: 35 })
  fine = await makeBin(app, { roomId: room.id, itemId: item.id, capacity: 60, enteredReorderPoint: 5, enteredPar: 35 })
  await sync(app, await app.as('nurse'), [
    operation(app, { type: 'count', binId: low.id, quantity: 4 }),
    operation(app, { type: 'count', binId: fine.id, quantity: 30 }),
  ])
})
afterAll(() => app.close())

const binOf = async (id: string): Promise<Bin> => (await coordinator.get(`/bins/${id}`)).body as Bin

describe('from the worklist to the shelf', () => {
  let order: Order

  it('lists exactly the bins below, with the packs that fill them up', async () => {
    const { items, total } = (await coordinator.get('/worklist')).body as { items: WorklistRow[]; total: number }
    expect(total).toBe(1)
    // Position 4, par 35, packs of 10: 3.1 packs, so 4, which the shelf of 60 holds.
    expect(items[0]).toMatchObject({
      binId: low.id,
      supplierId: supplier.id,
      under: 8,
      suggested: { packs: 4, packSize: 10, units: 40 },
    })
    // Monday 09:30: by 10:00 today, here tomorrow at 14:00.
    expect(items[0]).toMatchObject({ orderBy: '2026-11-02T10:00:00.000Z', nextArrival: '2026-11-03T14:00:00.000Z' })
  })

  it('drafts once: a second coordinator is told, not served', async () => {
    const body = { supplierId: supplier.id, lines: [{ binId: low.id, packs: 4 }] }
    const replies = await Promise.all([
      coordinator.post('/orders', body),
      coordinator.post('/orders', body),
      coordinator.post('/orders', body),
    ])
    expect(replies.map((r) => r.status).sort()).toEqual([201, 409, 409])
    expect(replies.find((r) => r.status === 409)!.body.code).toBe('in-another-draft')
    order = replies.find((r) => r.status === 201)!.body as Order
    expect(order).toMatchObject({ state: 'draft', sentAt: null, lines: [{ packs: 4, packSize: 10, units: 40 }] })
    expect((await binOf(low.id)).onOrder).toBe(0)
    expect((await coordinator.get('/worklist')).body.items[0].inDraft).toMatchObject({ orderId: order.id })
  })

  it('refuses lines that cannot be ordered, field by field', async () => {
    const pointer = async (lines: object[]): Promise<string> =>
      (await coordinator.post('/orders', { supplierId: supplier.id, lines })).body.errors[0].pointer
    expect(await pointer([])).toBe('/lines')
    expect(await pointer([{ binId: fine.id, packs: 1.5 }])).toBe('/lines/0/packs')
    expect(
      await pointer([
        { binId: fine.id, packs: 1 },
        { binId: fine.id, packs: 2 },
      ]),
    ).toBe('/lines/1/binId')
    expect(await pointer([{ binId: '999999', packs: 1 }])).toBe('/lines/0/binId')
    const other = await makeSupplier(app)
    const wrong = await coordinator.post('/orders', { supplierId: other.id, lines: [{ binId: fine.id, packs: 1 }] })
    expect(wrong.body.errors[0]).toMatchObject({
      pointer: '/lines/0/binId',
      detail: expect.stringContaining('does not come from'),
    })
  })

  it('changes while a draft, by version', async () => {
    const stale = await coordinator.patch(`/orders/${order.id}`, { version: 99, lines: [{ binId: low.id, packs: 3 }] })
    expect([stale.status, stale.body.code]).toEqual([409, 'order-changed'])
    const changed = await coordinator.patch(`/orders/${order.id}`, {
      version: order.version,
      lines: [{ binId: low.id, packs: 3 }],
    })
    expect(changed.body.lines).toMatchObject([{ packs: 3, units: 30 }])
  })

  it('is sent once, numbered once, mailed once', async () => {
    const replies = await Promise.all([
      coordinator.post(`/orders/${order.id}/send`),
      coordinator.post(`/orders/${order.id}/send`),
    ])
    expect(replies.map((r) => r.status).sort()).toEqual([200, 409])
    order = replies.find((r) => r.status === 200)!.body as Order
    expect(order).toMatchObject({ state: 'sent', number: 'B26-00001', expectedOn: '2026-11-03' })
    expect(await binOf(low.id)).toMatchObject({
      onOrder: 30,
      position: 34,
      under: 0,
      states: expect.arrayContaining(['on-order', 'ok']),
    })
    expect((await coordinator.get('/worklist')).body.total).toBe(0)
    const folder = mkdtempSync(join(tmpdir(), 'brimline-mail-'))
    const transport = fileTransport(folder)
    expect(await sendDue(app.database.db, app.clock, transport, 'test')).toBe(1)
    expect(await sendDue(app.database.db, app.clock, transport, 'test')).toBe(0)
    const files = readdirSync(join(folder, 'mail'))
    expect(files).toEqual([`order-${order.id}.eml`])
    const mail = readFileSync(join(folder, 'mail', files[0]!), 'utf8')
    expect(mail).toContain(`To: ${supplier.email}`)
    expect(mail).toContain('Reply-To: coordinator@tallowmere.example')
    expect(mail).toContain('IV cannula 20 G')
    expect(existsSync(join(folder, 'mail'))).toBe(true)
  })

  it('cannot change afterwards', async () => {
    const late = await coordinator.patch(`/orders/${order.id}`, { lines: [{ binId: low.id, packs: 9 }] })
    expect([late.status, late.body.code]).toEqual([409, 'order-changed'])
    const moved = await coordinator.patch(`/orders/${order.id}`, { expectedOn: '2026-11-05' })
    expect(moved.body.expectedOn).toBe('2026-11-05')
  })

  it('is put away in parts, by ward staff, and closes by itself', async () => {
    const line = order.lines[0]!.id
    const nurse = await app.as('nurse')
    await sync(app, nurse, [operation(app, { type: 'receipt', binId: low.id, orderLineId: line, quantity: 20 })])
    expect((await coordinator.get(`/orders/${order.id}`)).body).toMatchObject({
      state: 'part-received',
      lines: [{ receivedUnits: 20 }],
    })
    expect(await binOf(low.id)).toMatchObject({ onHand: 24, onOrder: 10, position: 34 })
    expect((await coordinator.get('/orders?state=part-received')).body.total).toBe(1)
    await sync(app, nurse, [operation(app, { type: 'receipt', binId: low.id, orderLineId: line, quantity: 10 })])
    expect((await coordinator.get(`/orders/${order.id}`)).body.state).toBe('closed')
    expect((await binOf(low.id)).onOrder).toBe(0)
    const cancelled = await coordinator.post(`/orders/${order.id}/cancel`, {})
    expect([cancelled.status, cancelled.body.code]).toEqual([409, 'order-changed'])
  })

  it('stops counting as cover two working days after its day, unless confirmed', async () => {
    const made = (await coordinator.post('/orders', { supplierId: supplier.id, lines: [{ binId: fine.id, packs: 1 }] }))
      .body as Order
    await coordinator.post(`/orders/${made.id}/send`)
    expect((await binOf(fine.id)).onOrder).toBe(10)
    // Expected on Tuesday 3 November; Thursday is two working days later, Friday three.
    const at = async (iso: string): Promise<Bin> => {
      app.clock.set(new Date(iso))
      coordinator = await app.as('coordinator')
      return binOf(fine.id)
    }
    expect(await at('2026-11-05T12:00:00Z')).toMatchObject({
      onOrder: 10,
      states: expect.arrayContaining(['late-order']),
    })
    expect(await at('2026-11-06T12:00:00Z')).toMatchObject({
      onOrder: 0,
      states: expect.arrayContaining(['late-order']),
    })
    await coordinator.post(`/orders/${made.id}/acknowledge`, { expectedOn: '2026-11-09' })
    expect(await binOf(fine.id)).toMatchObject({ onOrder: 10, expectedOn: '2026-11-09' })
    const gone = await coordinator.post(`/orders/${made.id}/cancel`, { reason: 'came from elsewhere' })
    expect(gone.body).toMatchObject({ state: 'cancelled', lines: [{ cancelledUnits: 10 }] })
    expect((await binOf(fine.id)).onOrder).toBe(0)
  })
})

describe('today', () => {
  it('shows each role its own part', async () => {
    expect(Object.keys((await (await app.as('nurse')).get('/today')).body)).toEqual([])
    expect((await (await app.as('coordinator')).get('/today')).body.coordinator).toMatchObject({
      toOrder: 0,
      cutOffs: [],
    })
    expect((await (await app.as('reviewer')).get('/today')).body.reviewer).toMatchObject({ due: 0 })
    expect((await (await app.as('administrator')).get('/today')).body.administrator).toEqual({ problems: [] })
  })
})
