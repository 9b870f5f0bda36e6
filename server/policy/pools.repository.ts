import { and, asc, eq, isNull, ne, sql } from 'drizzle-orm'
import { binAssignments, bins, items, rooms, wards } from '../catalogue/catalogue.tables.ts'
import type { Reader, Tx } from '../db/client.ts'
import { demandIntervals, policies, pools, weekdayProfiles } from './policy.tables.ts'

export type PoolRow = typeof pools.$inferSelect

export async function listPools(db: Reader): Promise<PoolRow[]> {
  return db.select().from(pools)
}

export async function findPool(db: Reader, itemId: number, wardKind: string): Promise<PoolRow | null> {
  const [row] = await db
    .select()
    .from(pools)
    .where(and(eq(pools.itemId, itemId), eq(pools.wardKind, wardKind)))
  return row ?? null
}

/** All pools at once: readers see last night's or tonight's, never a mixture. */
export async function replacePools(tx: Tx, rows: (typeof pools.$inferInsert)[]): Promise<void> {
  await tx.delete(pools)
  for (let i = 0; i < rows.length; i += 500) await tx.insert(pools).values(rows.slice(i, i + 500))
}

/** The pools of one item, where a person changed who helps it. */
export async function replacePoolsOfItem(tx: Tx, itemId: number, rows: (typeof pools.$inferInsert)[]): Promise<void> {
  await tx.delete(pools).where(eq(pools.itemId, itemId))
  if (rows.length) await tx.insert(pools).values(rows)
}

/** What each bin in use has to tell its like: kept with its policy when it was last worked out. */
export async function listMembers(db: Reader) {
  return db
    .select({
      binId: bins.id,
      wardId: wards.id,
      wardKind: wards.kind,
      itemId: items.id,
      category: items.category,
      member: sql<string | null>`json_extract(${policies.facts}, '$.member')`,
    })
    .from(bins)
    .innerJoin(rooms, eq(rooms.id, bins.roomId))
    .innerJoin(wards, eq(wards.id, rooms.wardId))
    .innerJoin(binAssignments, and(eq(binAssignments.binId, bins.id), isNull(binAssignments.assignedTo)))
    .innerJoin(items, eq(items.id, binAssignments.itemId))
    .innerJoin(
      policies,
      and(eq(policies.binId, bins.id), eq(policies.isCurrent, true), eq(policies.assignmentId, binAssignments.id)),
    )
    .where(and(isNull(bins.retiredAt), isNull(bins.overflowOf), ne(bins.kind, 'fixed-set')))
    .orderBy(asc(bins.id))
}

export async function listWardNames(db: Reader) {
  return db.select({ id: wards.id, name: wards.name }).from(wards)
}

// Weekday profiles ------------------------------------------------------------------------------------------------
export async function listProfiles(db: Reader) {
  return db.select().from(weekdayProfiles)
}

export async function replaceProfile(tx: Tx, row: typeof weekdayProfiles.$inferInsert): Promise<void> {
  await tx.insert(weekdayProfiles).values(row).onDuplicateKeyUpdate({ set: row })
}

/** Used intervals of the bins of one ward that did not end empty, under their present assignments. */
export async function listWardIntervals(db: Reader, wardId: number) {
  return db
    .select({
      binId: demandIntervals.binId,
      openedAt: demandIntervals.openedAt,
      closedAt: demandIntervals.closedAt,
      quantity: demandIntervals.quantity,
    })
    .from(demandIntervals)
    .innerJoin(bins, eq(bins.id, demandIntervals.binId))
    .innerJoin(rooms, eq(rooms.id, bins.roomId))
    .innerJoin(
      binAssignments,
      and(eq(binAssignments.id, demandIntervals.assignmentId), isNull(binAssignments.assignedTo)),
    )
    .where(and(eq(rooms.wardId, wardId), eq(demandIntervals.isUsed, true), eq(demandIntervals.isCensored, false)))
    .orderBy(asc(demandIntervals.binId), asc(demandIntervals.closedAt))
}

export async function listWardIds(db: Reader): Promise<number[]> {
  return (await db.select({ id: wards.id }).from(wards).where(isNull(wards.retiredAt))).map((w) => w.id)
}
