import { and, asc, eq, inArray, isNotNull, isNull, like, or, sql, type SQL } from 'drizzle-orm'
import { alias } from 'drizzle-orm/mysql-core'
import { binAssignments, bins, itemPacks, items, rooms, wards } from '../catalogue/catalogue.tables.ts'
import type { Reader } from '../db/client.ts'
import { policies } from '../policy/policy.tables.ts'
import { orderLines, orders } from '../replenishment/replenishment.tables.ts'
import { binLevels, movements } from './counts.tables.ts'

export interface BinFilter {
  roomIds: number[] | null
  roomId?: number
  binIds?: number[]
  code?: string
  q?: string
  itemId?: number
  retired: boolean
}

const where = (filter: BinFilter): SQL | undefined => {
  const parts: (SQL | undefined)[] = [filter.retired ? isNotNull(bins.retiredAt) : isNull(bins.retiredAt)]
  if (filter.binIds) parts[0] = undefined
  if (filter.roomIds) parts.push(filter.roomIds.length ? inArray(bins.roomId, filter.roomIds) : sql`FALSE`)
  if (filter.roomId !== undefined) parts.push(eq(bins.roomId, filter.roomId))
  if (filter.binIds) parts.push(filter.binIds.length ? inArray(bins.id, filter.binIds) : sql`FALSE`)
  if (filter.code !== undefined) parts.push(eq(bins.code, filter.code))
  if (filter.itemId !== undefined) parts.push(eq(binAssignments.itemId, filter.itemId))
  if (filter.q) {
    const pattern = `%${filter.q.replace(/[\\%_]/g, '\\$&')}%`
    const bare = `%${filter.q.replace(/[\s-]/g, '').replace(/[\\%_]/g, '\\$&')}%`
    parts.push(or(like(items.name, pattern), like(items.code, pattern), like(bins.code, bare)))
  }
  return and(...parts)
}

/** Everything one row of a bin list is made of but its orders, in one statement, in walking order. */
export async function listBinRows(db: Reader, filter: BinFilter) {
  return db
    .select({
      id: bins.id,
      code: bins.code,
      kind: bins.kind,
      overflowOf: bins.overflowOf,
      roomId: bins.roomId,
      roomName: rooms.name,
      roomMode: rooms.mode,
      wardId: wards.id,
      wardName: wards.name,
      wardKind: wards.kind,
      wardCalendarId: wards.calendarId,
      countEveryDays: rooms.countEveryDays,
      countDays: rooms.countDays,
      bay: bins.bay,
      shelf: bins.shelf,
      walkOrder: bins.walkOrder,
      retiredAt: bins.retiredAt,
      assignmentId: binAssignments.id,
      assignedFrom: binAssignments.assignedFrom,
      capacity: binAssignments.capacity,
      enteredPar: binAssignments.enteredPar,
      enteredReorderPoint: binAssignments.enteredReorderPoint,
      itemId: items.id,
      itemCode: items.code,
      itemName: items.name,
      unitOfUse: items.unitOfUse,
      countUnit: items.countUnit,
      ved: items.ved,
      packSize: itemPacks.unitsPerOrder,
      orderUnit: itemPacks.orderUnit,
      onHand: binLevels.onHand,
      held: binLevels.held,
      lastCountQuantity: binLevels.lastCountQuantity,
      lastCountAt: binLevels.lastCountAt,
      roomVersion: binLevels.roomVersion,
      policyId: policies.id,
      reorderPoint: policies.reorderPoint,
      parLevel: policies.parLevel,
      meanPerDay: sql<number | null>`json_value(${policies.result}, '$.demand.meanPerDay')`,
      closed: sql<string | null>`json_extract(${policies.facts}, '$.closed')`,
      gap: sql<string | null>`json_extract(${policies.facts}, '$.gap')`,
    })
    .from(bins)
    .innerJoin(rooms, eq(rooms.id, bins.roomId))
    .innerJoin(wards, eq(wards.id, rooms.wardId))
    .leftJoin(binAssignments, and(eq(binAssignments.binId, bins.id), isNull(binAssignments.assignedTo)))
    .leftJoin(items, eq(items.id, binAssignments.itemId))
    .leftJoin(itemPacks, and(eq(itemPacks.itemId, items.id), isNull(itemPacks.validTo)))
    .leftJoin(binLevels, eq(binLevels.binId, bins.id))
    .leftJoin(
      policies,
      and(eq(policies.binId, bins.id), eq(policies.isCurrent, true), eq(policies.assignmentId, binAssignments.id)),
    )
    .where(where(filter))
    .orderBy(asc(rooms.name), asc(rooms.id), asc(bins.walkOrder), asc(bins.id))
}

export type BinRow = Awaited<ReturnType<typeof listBinRows>>[number]

/** Lines of orders on their way, with what arrived and was put away (withdrawn entries left out). */
export async function listOpenLines(db: Reader, binIds: number[] | null) {
  const withdrawn = alias(movements, 'withdrawn')
  const sum = (type: 'receipt' | 'arrival') =>
    sql<number>`coalesce(sum(case when ${movements.type} = ${type} and ${withdrawn.id} is null then ${movements.quantity} end), 0)`
  if (binIds && binIds.length === 0) return []
  return db
    .select({
      lineId: orderLines.id,
      orderId: orders.id,
      orderNumber: orders.number,
      supplierId: orders.supplierId,
      state: orders.state,
      expectedOn: orders.expectedOn,
      sentAt: orders.sentAt,
      confirmedAt: orders.confirmedAt,
      binId: orderLines.binId,
      assignmentId: orderLines.assignmentId,
      itemId: orderLines.itemId,
      units: orderLines.units,
      cancelledUnits: orderLines.cancelledUnits,
      putAway: sum('receipt').mapWith(Number),
      arrived: sum('arrival').mapWith(Number),
    })
    .from(orderLines)
    .innerJoin(orders, eq(orders.id, orderLines.orderId))
    .leftJoin(movements, and(eq(movements.orderLineId, orderLines.id), inArray(movements.type, ['receipt', 'arrival'])))
    .leftJoin(withdrawn, and(eq(withdrawn.targetOpId, movements.opId), eq(withdrawn.type, 'withdraw')))
    .where(and(inArray(orders.state, ['sent', 'acknowledged']), binIds ? inArray(orderLines.binId, binIds) : undefined))
    .groupBy(orderLines.id, orders.id)
    .orderBy(asc(orders.expectedOn), asc(orderLines.id))
}

export type OpenLine = Awaited<ReturnType<typeof listOpenLines>>[number]

/** Overflow places of the given main bins, with their stock. */
export async function listOverflow(db: Reader, mainIds: number[]) {
  if (mainIds.length === 0) return []
  return db
    .select({ binId: bins.id, mainId: bins.overflowOf, onHand: binLevels.onHand, assignmentId: binLevels.assignmentId })
    .from(bins)
    .innerJoin(binLevels, eq(binLevels.binId, bins.id))
    .where(and(inArray(bins.overflowOf, mainIds), isNull(bins.retiredAt)))
}
