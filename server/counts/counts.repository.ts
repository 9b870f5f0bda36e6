import { and, asc, desc, eq, gt, inArray, isNull, lte, max, ne, sql } from 'drizzle-orm'
import {
  binAssignments,
  bins,
  itemBarcodes,
  itemPacks,
  items,
  lookalikes,
  rooms,
} from '../catalogue/catalogue.tables.ts'
import type { Db, Reader, Tx } from '../db/client.ts'
import { policies } from '../policy/policy.tables.ts'
import { orderLines, orders } from '../replenishment/replenishment.tables.ts'
import {
  binLevels,
  devices,
  movements,
  operations,
  quarantine,
  recountTasks,
  roomTombstones,
  roomVersions,
} from './counts.tables.ts'

export type MovementRow = typeof movements.$inferSelect
export type NewMovement = typeof movements.$inferInsert
export type NewOperation = typeof operations.$inferInsert
export type LevelRow = typeof binLevels.$inferSelect

// Operations ------------------------------------------------------------------------------------------------------
export async function findOperation(db: Reader, opId: string) {
  const [row] = await db.select().from(operations).where(eq(operations.opId, opId))
  return row ?? null
}

export async function insertOperations(tx: Tx, rows: NewOperation[]): Promise<void> {
  for (let i = 0; i < rows.length; i += 500) await tx.insert(operations).values(rows.slice(i, i + 500))
}

export async function insertMovements(tx: Tx, rows: NewMovement[]): Promise<void> {
  for (let i = 0; i < rows.length; i += 500) await tx.insert(movements).values(rows.slice(i, i + 500))
}

/** Kept once per entry and payload, however often the phone sends it. */
export async function insertQuarantine(db: Db | Tx, row: typeof quarantine.$inferInsert): Promise<void> {
  await db
    .insert(quarantine)
    .values(row)
    .onDuplicateKeyUpdate({ set: { id: sql`id` } })
}

/** Whether an entry stands refused. */
export async function wasRefused(db: Reader, opId: string): Promise<boolean> {
  const [row] = await db
    .select({ id: quarantine.id })
    .from(quarantine)
    .where(and(eq(quarantine.opId, opId), isNull(quarantine.closedAt)))
    .limit(1)
  return row !== undefined
}

export async function closeQuarantine(tx: Tx, opId: string, at: Date): Promise<void> {
  await tx
    .update(quarantine)
    .set({ closedAt: at })
    .where(and(eq(quarantine.opId, opId), isNull(quarantine.closedAt)))
}

export async function countOpenQuarantine(db: Reader): Promise<number> {
  const [row] = await db
    .select({ n: sql<number>`count(*)`.mapWith(Number) })
    .from(quarantine)
    .where(isNull(quarantine.closedAt))
  return row?.n ?? 0
}

/** A device is written down when first seen, and then at most every ten minutes. */
export async function seenDevice(db: Db, deviceId: string, appVersion: string, now: Date): Promise<void> {
  const stale = new Date(now.getTime() - 600_000)
  await db
    .insert(devices)
    .values({ deviceId, appVersion, firstSeenAt: now, lastSeenAt: now })
    .onDuplicateKeyUpdate({
      set: {
        appVersion: sql`if(${devices.lastSeenAt} < ${stale}, values(${devices.appVersion}), ${devices.appVersion})`,
        lastSeenAt: sql`if(${devices.lastSeenAt} < ${stale}, values(${devices.lastSeenAt}), ${devices.lastSeenAt})`,
      },
    })
}

// Bins and assignments --------------------------------------------------------------------------------------------
export async function findBin(db: Reader, by: { id: number } | { code: string }) {
  const [row] = await db
    .select({
      id: bins.id,
      code: bins.code,
      roomId: bins.roomId,
      overflowOf: bins.overflowOf,
      retiredAt: bins.retiredAt,
    })
    .from(bins)
    .where('id' in by ? eq(bins.id, by.id) : eq(bins.code, by.code))
  return row ?? null
}

export async function findBinOfItemInRoom(db: Reader, roomId: number, itemId: number) {
  const [row] = await db
    .select({ id: bins.id, roomId: bins.roomId, overflowOf: bins.overflowOf })
    .from(bins)
    .innerJoin(binAssignments, and(eq(binAssignments.binId, bins.id), isNull(binAssignments.assignedTo)))
    .where(
      and(eq(bins.roomId, roomId), eq(binAssignments.itemId, itemId), isNull(bins.retiredAt), isNull(bins.overflowOf)),
    )
    .orderBy(asc(bins.walkOrder), asc(bins.id))
    .limit(1)
  return row ?? null
}

export async function roomExists(db: Reader, roomId: number): Promise<boolean> {
  const [row] = await db.select({ id: rooms.id }).from(rooms).where(eq(rooms.id, roomId))
  return row !== undefined
}

/** Assignments of a bin, newest first. */
export async function listAssignments(db: Reader, binId: number) {
  return db
    .select({
      id: binAssignments.id,
      itemId: binAssignments.itemId,
      assignedFrom: binAssignments.assignedFrom,
      assignedTo: binAssignments.assignedTo,
      capacity: binAssignments.capacity,
      packSize: itemPacks.unitsPerOrder,
    })
    .from(binAssignments)
    .leftJoin(itemPacks, and(eq(itemPacks.itemId, binAssignments.itemId), isNull(itemPacks.validTo)))
    .where(eq(binAssignments.binId, binId))
    .orderBy(desc(binAssignments.assignedFrom), desc(binAssignments.id))
}

export async function findOrderLine(db: Reader, lineId: number) {
  const [row] = await db
    .select({ id: orderLines.id, binId: orderLines.binId, itemId: orderLines.itemId, state: orders.state })
    .from(orderLines)
    .innerJoin(orders, eq(orders.id, orderLines.orderId))
    .where(eq(orderLines.id, lineId))
  return row ?? null
}

// Ledger ----------------------------------------------------------------------------------------------------------
/** Locks the level rows of the bins, in one order for everybody. The rows exist since the bins do. */
export async function lockLevels(tx: Tx, binIds: number[]): Promise<LevelRow[]> {
  const sorted = [...new Set(binIds)].sort((a, b) => a - b)
  return tx.select().from(binLevels).where(inArray(binLevels.binId, sorted)).orderBy(asc(binLevels.binId)).for('update')
}

export async function listLedger(
  db: Reader,
  binId: number,
  assignmentId: number | null = null,
): Promise<MovementRow[]> {
  return db
    .select()
    .from(movements)
    .where(
      and(eq(movements.binId, binId), assignmentId === null ? undefined : eq(movements.assignmentId, assignmentId)),
    )
    .orderBy(asc(movements.effectiveAt), asc(movements.id))
}

export async function listMovementsOfOps(db: Reader, opIds: string[]): Promise<MovementRow[]> {
  if (opIds.length === 0) return []
  return db.select().from(movements).where(inArray(movements.opId, opIds))
}

export async function insertLevel(tx: Tx, row: typeof binLevels.$inferInsert): Promise<void> {
  await tx.insert(binLevels).values(row)
}

export async function updateLevel(tx: Tx, binId: number, set: Partial<LevelRow>): Promise<void> {
  await tx.update(binLevels).set(set).where(eq(binLevels.binId, binId))
}

// Room versions ---------------------------------------------------------------------------------------------------
export async function ensureRoomVersion(tx: Tx, roomId: number): Promise<void> {
  await tx
    .insert(roomVersions)
    .values({ roomId, version: 1, resetBefore: 0 })
    .onDuplicateKeyUpdate({ set: { roomId: sql`room_id` } })
}

/** Raises the version of a room under its lock. @returns the new version */
export async function raiseRoomVersion(tx: Tx, roomId: number): Promise<number> {
  const [row] = await tx.select().from(roomVersions).where(eq(roomVersions.roomId, roomId)).for('update')
  if (!row) {
    await ensureRoomVersion(tx, roomId)
    return raiseRoomVersion(tx, roomId)
  }
  await tx
    .update(roomVersions)
    .set({ version: row.version + 1 })
    .where(eq(roomVersions.roomId, roomId))
  return row.version + 1
}

export async function markBinsChanged(tx: Tx, binIds: number[], version: number): Promise<void> {
  if (binIds.length) await tx.update(binLevels).set({ roomVersion: version }).where(inArray(binLevels.binId, binIds))
}

/** Rooms of bins and of the main places of overflow bins, whose stock changes with theirs. */
export async function roomsOfBins(db: Reader, binIds: number[]): Promise<{ binId: number; roomId: number }[]> {
  if (binIds.length === 0) return []
  const rows = await db
    .select({ binId: bins.id, roomId: bins.roomId, overflowOf: bins.overflowOf })
    .from(bins)
    .where(inArray(bins.id, binIds))
  const mains = rows.flatMap((r) => (r.overflowOf === null ? [] : [{ binId: r.overflowOf, roomId: r.roomId }]))
  return [...rows, ...mains]
}

export async function readRoomVersion(db: Reader, roomId: number) {
  const [row] = await db.select().from(roomVersions).where(eq(roomVersions.roomId, roomId))
  return row ?? { roomId, version: 0, resetBefore: 0 }
}

export async function changedBins(db: Reader, roomId: number, since: number): Promise<number[]> {
  const rows = await db
    .select({ binId: binLevels.binId })
    .from(binLevels)
    .innerJoin(bins, eq(bins.id, binLevels.binId))
    .where(and(eq(bins.roomId, roomId), gt(binLevels.roomVersion, since)))
  return rows.map((r) => r.binId)
}

export async function tombstonesSince(db: Reader, roomId: number, since: number): Promise<number[]> {
  const rows = await db
    .select({ binId: roomTombstones.binId })
    .from(roomTombstones)
    .where(and(eq(roomTombstones.roomId, roomId), gt(roomTombstones.roomVersion, since)))
  return [...new Set(rows.map((r) => r.binId))]
}

export async function insertTombstone(tx: Tx, roomId: number, binId: number, version: number): Promise<void> {
  await tx.insert(roomTombstones).values({ roomId, binId, roomVersion: version })
}

// Recounts --------------------------------------------------------------------------------------------------------
export async function insertRecount(tx: Tx, row: typeof recountTasks.$inferInsert): Promise<void> {
  await tx
    .insert(recountTasks)
    .values(row)
    .onDuplicateKeyUpdate({ set: { id: sql`id` } })
}

/** A later count of the bin settles what was asked. */
export async function closeRecounts(tx: Tx, binId: number, opId: string, at: Date): Promise<void> {
  await tx
    .update(recountTasks)
    .set({ closedAt: at })
    .where(
      and(
        eq(recountTasks.binId, binId),
        ne(recountTasks.opId, opId),
        isNull(recountTasks.closedAt),
        lte(recountTasks.createdAt, at),
      ),
    )
}

// What a phone keeps ----------------------------------------------------------------------------------------------
export async function listSnapshotItems(db: Reader, itemIds: number[]) {
  if (itemIds.length === 0) return { items: [], barcodes: [], lookalikes: [] }
  const rows = await db
    .select({
      id: items.id,
      code: items.code,
      name: items.name,
      unitOfUse: items.unitOfUse,
      countUnit: items.countUnit,
      countNote: items.countNote,
      ved: items.ved,
      isLatex: items.isLatex,
      isColdChain: items.isColdChain,
      orderUnit: itemPacks.orderUnit,
      packSize: itemPacks.unitsPerOrder,
    })
    .from(items)
    .leftJoin(itemPacks, and(eq(itemPacks.itemId, items.id), isNull(itemPacks.validTo)))
    .where(inArray(items.id, itemIds))
  const codes = await db.select().from(itemBarcodes).where(inArray(itemBarcodes.itemId, itemIds))
  const others = await db
    .select({ itemId: lookalikes.itemId, name: items.name })
    .from(lookalikes)
    .innerJoin(items, eq(items.id, lookalikes.otherItemId))
    .where(inArray(lookalikes.itemId, itemIds))
  return { items: rows, barcodes: codes, lookalikes: others }
}

export async function listSnapshotPolicies(db: Reader, binIds: number[]) {
  if (binIds.length === 0) return []
  return db
    .select({
      binId: policies.binId,
      reorderPoint: policies.reorderPoint,
      parLevel: policies.parLevel,
      input: policies.input,
      result: policies.result,
    })
    .from(policies)
    .where(and(inArray(policies.binId, binIds), eq(policies.isCurrent, true)))
}

/** Why stock of the bins is held, newest first. */
export async function listHolds(db: Reader, binIds: number[]) {
  if (binIds.length === 0) return []
  return db
    .select({ binId: movements.binId, reason: movements.reason })
    .from(movements)
    .where(and(inArray(movements.binId, binIds), eq(movements.type, 'hold')))
    .orderBy(desc(movements.effectiveAt), desc(movements.id))
}

/** When the ledger was last written: an earlier clock is refused at start. */
export async function newestRecordedAt(db: Reader): Promise<Date | null> {
  const [row] = await db.select({ at: max(movements.recordedAt) }).from(movements)
  return row?.at ?? null
}

export async function findLevel(db: Reader, binId: number): Promise<LevelRow | null> {
  const [row] = await db.select().from(binLevels).where(eq(binLevels.binId, binId))
  return row ?? null
}
