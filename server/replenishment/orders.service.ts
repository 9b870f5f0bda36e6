import { DateTime } from 'luxon'
import type { Order, OrderState } from '#shared/contracts/replenishment.ts'
import { fieldProblem, problem } from '#shared/contracts/problems.ts'
import { formatShelfCode } from '#shared/barcode/shelf-code.ts'
import { openUnitsOf, orderStateOf } from '#shared/replenishment/order-state.ts'
import { audit } from '../audit/audit.service.ts'
import { arrivalIfOrderedAt, closedDays, placeTimes } from '../catalogue/calendar.service.ts'
import { readHospital } from '../catalogue/hospital.service.ts'
import { supplierRow } from '../catalogue/places.service.ts'
import type { Clock } from '../clock.ts'
import { momentOf, pageOf, viewBins } from '../counts/bin-view.service.ts'
import { touchBins } from '../counts/levels.service.ts'
import type { Reader, Tx } from '../db/client.ts'
import { isDuplicate } from '../db/errors.ts'
import type { Actor } from '../http/context.ts'
import { queueMail } from '../mail/mail.service.ts'
import { readUser } from '../people/people.service.ts'
import { observeLeadTimes } from './lead-times.service.ts'
import { orderMail } from './order-mail.ts'
import * as repo from './replenishment.repository.ts'

type Row = Awaited<ReturnType<typeof repo.listOrderRows>>[number]

function toLine({ line, ...more }: repo.LineRow): Order['lines'][number] {
  return {
    id: String(line.id),
    binId: String(line.binId),
    itemId: String(line.itemId),
    itemName: more.itemName,
    roomId: String(more.roomId),
    roomName: more.roomName,
    binDisplay: formatShelfCode(more.binCode),
    packs: line.packs,
    packSize: line.packSize,
    orderUnit: line.orderUnit,
    units: line.units,
    // What is on the shelf has been in the building, whether or not somebody said so.
    arrivedUnits: Math.max(more.arrivedUnits, more.receivedUnits),
    receivedUnits: more.receivedUnits,
    cancelledUnits: line.cancelledUnits,
    price: line.price,
  }
}

function toOrder({ order, supplierName, supplierKind }: Row, lines: repo.LineRow[]): Order {
  const own = lines.filter((l) => l.line.orderId === order.id).map(toLine)
  return {
    id: String(order.id),
    number: order.number ?? `draft ${order.id}`,
    supplierId: String(order.supplierId),
    supplierName,
    supplierKind,
    state: orderStateOf(order.state, own),
    outsideReference: order.outsideReference,
    createdAt: order.createdAt.toISOString(),
    sentAt: order.sentAt?.toISOString() ?? null,
    expectedOn: order.expectedOn,
    version: order.version,
    lines: own,
  }
}

export async function readOrder(db: Reader, id: number): Promise<Order> {
  const [row] = await repo.listOrderRows(db, { ids: [id] })
  if (!row) throw problem('not-found')
  return toOrder(row, await repo.listLines(db, [id]))
}

interface ListQuery {
  state?: OrderState
  open?: 'yes' | 'no'
  supplierId?: string
  page: number
  pageSize: number
}

const stillOpen = new Set<OrderState>(['draft', 'sent', 'acknowledged', 'part-received'])
/** States a person decides; how far a delivery came is read from the ledger. */
const underWay: OrderState[] = ['sent', 'acknowledged']

function storedStates(query: ListQuery): OrderState[] | undefined {
  if (query.state === 'part-received' || query.state === 'closed') return underWay
  if (query.state) return [query.state]
  return query.open === 'yes' ? ['draft', ...underWay] : undefined
}

/** Orders, newest first. */
export async function listOrders(db: Reader, query: ListQuery) {
  const rows = await repo.listOrderRows(db, {
    supplierId: query.supplierId === undefined ? undefined : Number(query.supplierId),
    states: storedStates(query),
  })
  const lines = await repo.listLines(
    db,
    rows.map((r) => r.order.id),
  )
  const byOrder = new Map<number, repo.LineRow[]>()
  for (const l of lines) byOrder.set(l.line.orderId, [...(byOrder.get(l.line.orderId) ?? []), l])
  const all = rows
    .map((row) => toOrder(row, byOrder.get(row.order.id) ?? []))
    .filter((o) => query.state === undefined || o.state === query.state)
    .filter((o) => query.open === undefined || stillOpen.has(o.state) === (query.open === 'yes'))
  return pageOf(all, query)
}

interface LineInput {
  binId: string
  packs: number
}

/** Draft lines as stored: the pack and price of the moment. */
async function draftLines(tx: Tx, clock: Clock, supplierId: number, orderId: number, input: LineInput[]) {
  const seen = new Set<string>()
  const twice = input.findIndex((l) => seen.has(l.binId) || !seen.add(l.binId))
  if (twice >= 0) throw fieldProblem(`/lines/${twice}/binId`, 'this place is in the order twice')
  const { timeZone } = await readHospital(tx)
  const views = await viewBins(tx, momentOf(clock, timeZone), {
    roomIds: null,
    binIds: input.map((l) => Number(l.binId)),
    retired: false,
  })
  const supply = await repo.listSupplyOf(
    tx,
    supplierId,
    views.flatMap((v) => (v.row.itemId === null ? [] : [v.row.itemId])),
  )
  return input.map((line, i) => {
    const view = views.find((v) => v.bin.id === line.binId && !v.bin.retired)
    if (!view || view.row.itemId === null || view.row.assignmentId === null)
      throw fieldProblem(`/lines/${i}/binId`, 'there is no such place, or it holds no item')
    if (view.row.overflowOf !== null)
      throw fieldProblem(`/lines/${i}/binId`, 'an overflow place is ordered for through its main place')
    const agreement = supply.find((s) => s.itemId === view.row.itemId)
    if (!agreement)
      throw fieldProblem(`/lines/${i}/binId`, `${view.row.itemName ?? 'This item'} does not come from this supplier`)
    return {
      orderId,
      binId: view.row.id,
      assignmentId: view.row.assignmentId,
      itemId: view.row.itemId,
      packs: line.packs,
      packSize: view.bin.packSize,
      orderUnit: view.bin.orderUnit,
      units: line.packs * view.bin.packSize,
      cancelledUnits: 0,
      price: agreement.price,
    }
  })
}

async function claim(tx: Tx, orderId: number, binIds: number[]): Promise<void> {
  await repo.claimBins(tx, orderId, binIds).catch((error: unknown) => {
    throw isDuplicate(error) ? problem('in-another-draft') : error
  })
}

export async function createOrder(
  tx: Tx,
  clock: Clock,
  actor: Actor,
  input: { supplierId: string; lines: LineInput[] },
): Promise<Order> {
  const supplier = await supplierRow(tx, Number(input.supplierId))
  if (!supplier || supplier.retiredAt) throw fieldProblem('/supplierId', 'choose a supplier that is in use')
  const now = clock.now()
  const id = await repo.insertOrder(tx, {
    supplierId: supplier.id,
    state: 'draft',
    version: 1,
    createdBy: actor.id,
    createdAt: now,
  })
  const lines = await draftLines(tx, clock, supplier.id, id, input.lines)
  await repo.insertLines(tx, lines)
  await claim(
    tx,
    id,
    lines.map((l) => l.binId),
  )
  await audit(tx, { at: now, userId: actor.id, action: 'order-drafted', subject: 'order', subjectId: id, after: input })
  return readOrder(tx, id)
}

async function lockDraft(tx: Tx, id: number): Promise<repo.OrderRow> {
  const order = await repo.lockOrder(tx, id)
  if (!order) throw problem('not-found')
  if (order.state !== 'draft')
    throw problem('order-changed', 'This order was sent or cancelled meanwhile and cannot change.')
  return order
}

export async function updateOrder(
  tx: Tx,
  clock: Clock,
  actor: Actor,
  id: number,
  input: { lines?: LineInput[]; expectedOn?: string; version?: number },
): Promise<Order> {
  const order = await repo.lockOrder(tx, id)
  if (!order) throw problem('not-found')
  if (input.version !== undefined && input.version !== order.version) throw problem('order-changed')
  if (input.lines) {
    await lockDraft(tx, id)
    const lines = await draftLines(tx, clock, order.supplierId, id, input.lines)
    await repo.releaseBins(tx, id)
    await repo.deleteLines(tx, id)
    await repo.insertLines(tx, lines)
    await claim(
      tx,
      id,
      lines.map((l) => l.binId),
    )
  }
  if (input.expectedOn && order.state !== 'draft') await lockUnderWay(tx, id)
  await repo.updateOrder(tx, id, input.expectedOn ? { expectedOn: input.expectedOn } : {})
  await audit(tx, {
    at: clock.now(),
    userId: actor.id,
    action: 'order-changed',
    subject: 'order',
    subjectId: id,
    before: { expectedOn: order.expectedOn },
    after: input,
  })
  const after = await readOrder(tx, id)
  if (input.expectedOn)
    await touchBins(
      tx,
      clock.now(),
      after.lines.map((l) => Number(l.binId)),
      null,
    )
  return after
}

/** Sends a draft: one number for ever, the expected day by the supplier's calendar, mail in the same transaction. */
export async function sendOrder(tx: Tx, clock: Clock, actor: Actor, id: number): Promise<Order> {
  const draft = await lockDraft(tx, id)
  const now = clock.now()
  const hospital = await readHospital(tx)
  const supplier = await supplierRow(tx, draft.supplierId)
  if (!supplier) throw problem('not-found')
  const local = DateTime.fromJSDate(now, { zone: hospital.timeZone })
  const number = `B${local.toFormat('yy')}-${String(await repo.drawNumber(tx, local.year)).padStart(5, '0')}`
  const arrives = await firstArrival(tx, id, supplier, hospital.timeZone, now)
  const expectedOn = draft.expectedOn ?? DateTime.fromJSDate(arrives, { zone: hospital.timeZone }).toISODate()
  await repo.updateOrder(tx, id, { state: 'sent', number, sentAt: now, sentBy: actor.id, expectedOn })
  await repo.releaseBins(tx, id)
  const order = await readOrder(tx, id)
  if (supplier.email) {
    const sender = await readUser(tx, actor.id)
    const mail = orderMail(order, {
      hospital: hospital.name,
      timeZone: hospital.timeZone,
      senderName: sender?.name ?? 'the coordinator',
    })
    await queueMail(tx, now, { dedupeKey: `order-${id}`, to: supplier.email, replyTo: sender?.email, ...mail })
  }
  await audit(tx, {
    at: now,
    userId: actor.id,
    action: 'order-sent',
    subject: 'order',
    subjectId: id,
    after: { number, expectedOn },
  })
  await touchBins(
    tx,
    now,
    order.lines.map((l) => Number(l.binId)),
    null,
  )
  return order
}

/** When the first of an order's wards gets it: one that is closed takes its share later. */
async function firstArrival(
  tx: Tx,
  orderId: number,
  supplier: NonNullable<Awaited<ReturnType<typeof supplierRow>>>,
  timeZone: string,
  now: Date,
): Promise<Date> {
  const closed = await closedDays(tx)
  const arrivals = (await repo.listWardsOfOrder(tx, orderId)).map((ward) =>
    arrivalIfOrderedAt(supplier, timeZone, now, placeTimes(closed, supplier, ward)).getTime(),
  )
  return new Date(Math.min(...arrivals))
}

async function lockUnderWay(tx: Tx, id: number): Promise<Order> {
  const row = await repo.lockOrder(tx, id)
  if (!row) throw problem('not-found')
  if (row.state === 'draft') throw problem('order-not-sent', 'This is still a draft. Send it first.')
  const order = await readOrder(tx, id)
  if (!stillOpen.has(order.state)) throw problem('order-changed', `This order is ${order.state} already.`)
  return order
}

export async function acknowledgeOrder(
  tx: Tx,
  clock: Clock,
  actor: Actor,
  id: number,
  expectedOn: string | undefined,
): Promise<Order> {
  const order = await lockUnderWay(tx, id)
  const now = clock.now()
  await repo.updateOrder(tx, id, {
    state: 'acknowledged',
    acknowledgedAt: now,
    ...(expectedOn ? { expectedOn, confirmedAt: now } : {}),
  })
  await audit(tx, {
    at: now,
    userId: actor.id,
    action: 'order-acknowledged',
    subject: 'order',
    subjectId: id,
    after: { expectedOn },
  })
  await touchBins(
    tx,
    now,
    order.lines.map((l) => Number(l.binId)),
    null,
  )
  return readOrder(tx, id)
}

/** Cancels what has not been put away; what is on the shelf stays there. */
export async function cancelOrder(
  tx: Tx,
  clock: Clock,
  actor: Actor,
  id: number,
  reason: string | undefined,
): Promise<Order> {
  const row = await repo.lockOrder(tx, id)
  if (!row) throw problem('not-found')
  const before = row.state === 'draft' ? await readOrder(tx, id) : await lockUnderWay(tx, id)
  const now = clock.now()
  const anyPutAway = before.lines.some((l) => l.receivedUnits > 0)
  for (const line of before.lines) await repo.setCancelled(tx, Number(line.id), line.cancelledUnits + openUnitsOf(line))
  await repo.updateOrder(tx, id, {
    ...(anyPutAway ? {} : { state: 'cancelled' as const }),
    cancelledAt: now,
    cancelReason: reason ?? null,
  })
  await repo.releaseBins(tx, id)
  // What is there may be all of what is left of a line.
  if (before.state !== 'draft')
    await observeLeadTimes(
      tx,
      before.lines.map((l) => Number(l.id)),
    )
  await audit(tx, {
    at: now,
    userId: actor.id,
    action: 'order-cancelled',
    subject: 'order',
    subjectId: id,
    reason: reason ?? null,
  })
  await touchBins(
    tx,
    now,
    before.lines.map((l) => Number(l.binId)),
    null,
  )
  return readOrder(tx, id)
}

/** Open drafts of some bins, for "in a draft already". */
export async function draftsOf(
  db: Reader,
  binIds: number[],
): Promise<Map<number, { orderId: string; number: string }>> {
  const rows = await repo.listDraftsOf(db, binIds)
  return new Map(rows.map((r) => [r.binId, { orderId: String(r.orderId), number: `draft ${r.orderId}` }]))
}

export const preferredSupply = repo.listPreferredSupply
