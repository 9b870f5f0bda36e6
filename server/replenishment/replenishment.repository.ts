import { and, asc, desc, eq, inArray, isNull, sql } from 'drizzle-orm'
import { alias } from 'drizzle-orm/mysql-core'
import type { OrderState } from '#shared/contracts/replenishment.ts'
import { bins, items, rooms, suppliers, supplyAgreements, wards } from '../catalogue/catalogue.tables.ts'
import { movements } from '../counts/counts.tables.ts'
import type { Reader, Tx } from '../db/client.ts'
import { draftBins, orderLines, orderNumbers, orders } from './replenishment.tables.ts'

export type OrderRow = typeof orders.$inferSelect

export async function insertOrder(tx: Tx, row: typeof orders.$inferInsert): Promise<number> {
  const [made] = await tx.insert(orders).values(row).$returningId()
  return made!.id
}

export async function lockOrder(tx: Tx, id: number): Promise<OrderRow | null> {
  const [row] = await tx.select().from(orders).where(eq(orders.id, id)).for('update')
  return row ?? null
}

export async function updateOrder(tx: Tx, id: number, set: Partial<OrderRow>): Promise<void> {
  await tx
    .update(orders)
    .set({ ...set, version: sql`${orders.version} + 1` })
    .where(eq(orders.id, id))
}

export async function insertLines(tx: Tx, rows: (typeof orderLines.$inferInsert)[]): Promise<void> {
  for (let i = 0; i < rows.length; i += 500) await tx.insert(orderLines).values(rows.slice(i, i + 500))
}

export async function deleteLines(tx: Tx, orderId: number): Promise<void> {
  await tx.delete(orderLines).where(eq(orderLines.orderId, orderId))
}

export async function setCancelled(tx: Tx, lineId: number, units: number): Promise<void> {
  await tx.update(orderLines).set({ cancelledUnits: units }).where(eq(orderLines.id, lineId))
}

/** Fails with a duplicate key where a bin is in another draft. */
export async function claimBins(tx: Tx, orderId: number, binIds: number[]): Promise<void> {
  const rows = [...binIds].sort((a, b) => a - b).map((binId) => ({ binId, orderId }))
  if (rows.length) await tx.insert(draftBins).values(rows)
}

export async function releaseBins(tx: Tx, orderId: number): Promise<void> {
  await tx.delete(draftBins).where(eq(draftBins.orderId, orderId))
}

/** Drafts that hold these bins. */
export async function listDraftsOf(db: Reader, binIds: number[]) {
  if (binIds.length === 0) return []
  return db.select().from(draftBins).where(inArray(draftBins.binId, binIds))
}

/** The next number of a year, under its lock; never given twice, even when the order is not sent after all. */
export async function drawNumber(tx: Tx, year: number): Promise<number> {
  await tx.insert(orderNumbers).values({ year, last: 0 }).onDuplicateKeyUpdate({ set: { year } })
  const [row] = await tx.select().from(orderNumbers).where(eq(orderNumbers.year, year)).for('update')
  const next = (row?.last ?? 0) + 1
  await tx.update(orderNumbers).set({ last: next }).where(eq(orderNumbers.year, year))
  return next
}

export async function listOrderRows(
  db: Reader,
  filter: { supplierId?: number; ids?: number[]; states?: OrderState[] },
) {
  if (filter.ids && filter.ids.length === 0) return []
  return db
    .select({ order: orders, supplierName: suppliers.name, supplierKind: suppliers.kind })
    .from(orders)
    .innerJoin(suppliers, eq(suppliers.id, orders.supplierId))
    .where(
      and(
        filter.supplierId === undefined ? undefined : eq(orders.supplierId, filter.supplierId),
        filter.ids ? inArray(orders.id, filter.ids) : undefined,
        filter.states ? inArray(orders.state, filter.states) : undefined,
      ),
    )
    .orderBy(desc(orders.createdAt), desc(orders.id))
}

/** Lines with what arrived and was put away; withdrawn entries left out. */
export async function listLines(db: Reader, orderIds: number[]) {
  if (orderIds.length === 0) return []
  const withdrawn = alias(movements, 'withdrawn')
  const sum = (type: 'receipt' | 'arrival') =>
    sql<number>`coalesce(sum(case when ${movements.type} = ${type} and ${withdrawn.id} is null then ${movements.quantity} end), 0)`.mapWith(
      Number,
    )
  return db
    .select({
      line: orderLines,
      itemName: items.name,
      orderName: items.orderName,
      itemCode: items.code,
      roomId: rooms.id,
      roomName: rooms.name,
      roomCode: rooms.code,
      binCode: bins.code,
      receivedUnits: sum('receipt'),
      arrivedUnits: sum('arrival'),
    })
    .from(orderLines)
    .innerJoin(items, eq(items.id, orderLines.itemId))
    .innerJoin(bins, eq(bins.id, orderLines.binId))
    .innerJoin(rooms, eq(rooms.id, bins.roomId))
    .leftJoin(movements, and(eq(movements.orderLineId, orderLines.id), inArray(movements.type, ['receipt', 'arrival'])))
    .leftJoin(withdrawn, and(eq(withdrawn.targetOpId, movements.opId), eq(withdrawn.type, 'withdraw')))
    .where(inArray(orderLines.orderId, orderIds))
    .groupBy(orderLines.id, items.id, rooms.id, bins.id)
    .orderBy(asc(orderLines.id))
}
export type LineRow = Awaited<ReturnType<typeof listLines>>[number]

/** Calendars of the wards that an order is for. */
export async function listWardsOfOrder(db: Reader, orderId: number) {
  return db
    .selectDistinct({ wardCalendarId: wards.calendarId })
    .from(orderLines)
    .innerJoin(bins, eq(bins.id, orderLines.binId))
    .innerJoin(rooms, eq(rooms.id, bins.roomId))
    .innerJoin(wards, eq(wards.id, rooms.wardId))
    .where(eq(orderLines.orderId, orderId))
}

/** Who supplies each item first. */
export async function listPreferredSupply(db: Reader, itemIds: number[]) {
  if (itemIds.length === 0) return []
  return db
    .select({
      itemId: supplyAgreements.itemId,
      price: supplyAgreements.price,
      supplierItem: supplyAgreements.supplierItem,
      supplier: suppliers,
    })
    .from(supplyAgreements)
    .innerJoin(suppliers, eq(suppliers.id, supplyAgreements.supplierId))
    .where(
      and(
        inArray(supplyAgreements.itemId, itemIds),
        eq(supplyAgreements.isPreferred, true),
        isNull(suppliers.retiredAt),
      ),
    )
}

export async function listSupplyOf(db: Reader, supplierId: number, itemIds: number[]) {
  if (itemIds.length === 0) return []
  return db
    .select()
    .from(supplyAgreements)
    .where(and(eq(supplyAgreements.supplierId, supplierId), inArray(supplyAgreements.itemId, itemIds)))
}
