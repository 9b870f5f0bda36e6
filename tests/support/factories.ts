import { uuidv7 } from 'uuidv7'
import type { Bin } from '#shared/contracts/bins.ts'
import type { Item, Room, Supplier } from '#shared/contracts/catalogue.ts'
import type { Caller, TestApp } from './app.ts'

let serial = 0
const next = (): number => (serial += 1)

async function made<T>(call: PromiseLike<{ status: number; body: unknown; text: string }>): Promise<T> {
  const reply = await call
  if (reply.status !== 201) throw new Error(`${reply.status}: ${reply.text}`)
  return reply.body as T
}

export async function makeRoom(app: TestApp, more: Partial<Room> & { wardKind?: string } = {}): Promise<Room> {
  const coordinator = await app.as('coordinator')
  const n = next()
  const ward = await made<{ id: string }>(
    coordinator.post('/wards', { code: `W${n}`, name: `Ward ${n}`, kind: more.wardKind ?? 'general' }),
  )
  return made(
    coordinator.post('/rooms', {
      code: `R${n}`,
      name: more.name ?? `Supply room ${n}`,
      wardId: ward.id,
      countEveryDays: more.countEveryDays ?? 1,
      countDays: more.countDays ?? '',
      mode: more.mode ?? 'calculated',
    }),
  )
}

export async function makeSupplier(app: TestApp, more: Partial<Supplier> = {}): Promise<Supplier> {
  const coordinator = await app.as('coordinator')
  const n = next()
  return made(
    coordinator.post('/suppliers', {
      code: `S${n}`,
      name: `Supplier ${n}`,
      email: `orders${n}@supplier.example`,
      kind: 'stores',
      orderDays: '12345',
      cutOff: '10:00',
      arrivalDays: '12345',
      leadWorkingDays: 1,
      minimumOrder: 0,
      ...more,
    }),
  )
}

export async function makeItem(app: TestApp, more: Partial<Item> = {}): Promise<Item> {
  const coordinator = await app.as('coordinator')
  const n = next()
  const supplierId = more.supplierId ?? (await makeSupplier(app)).id
  return made(
    coordinator.post('/items', {
      code: `I${n}`,
      name: `Item ${n}`,
      orderName: `Item ${n}, in full`,
      unitOfUse: 'each',
      countUnit: 'each',
      ved: 'E',
      orderUnit: 'box',
      unitsPerOrder: 10,
      price: 0.5,
      ...more,
      supplierId,
    }),
  )
}

export async function makeBin(
  app: TestApp,
  more: Partial<Bin> & { roomId: string; itemId: string | null },
): Promise<Bin> {
  const coordinator = await app.as('coordinator')
  return made(
    coordinator.post('/bins', {
      roomId: more.roomId,
      itemId: more.itemId,
      kind: more.kind ?? 'counted',
      overflowOf: more.overflowOf ?? null,
      capacity: more.capacity ?? null,
      enteredReorderPoint: more.enteredReorderPoint ?? null,
      enteredPar: more.enteredPar ?? null,
    }),
  )
}

/** One entry as a phone makes it. */
export function operation(app: TestApp, fields: Record<string, unknown>): Record<string, unknown> {
  return { opId: uuidv7(), v: 1, localSeq: next(), deviceTime: app.clock.now().toISOString(), ...fields }
}

export function sync(app: TestApp, caller: Caller, items: Record<string, unknown>[], deviceId = 'phone-1') {
  return caller.post('/sync/operations', {
    deviceId,
    userId: caller.userId,
    appVersion: 'test',
    sentAt: app.clock.now().toISOString(),
    items,
  })
}

export interface SyncReply {
  results: { opId: string; status: string; code?: string; message?: string; flags?: string[] }[]
}
