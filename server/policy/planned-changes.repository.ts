import { and, asc, desc, eq, gte, inArray, isNull, lte, or, type SQL } from 'drizzle-orm'
import { binAssignments, bins, items, rooms, wards } from '../catalogue/catalogue.tables.ts'
import type { Reader, Tx } from '../db/client.ts'
import { demandIntervals, plannedChanges } from './policy.tables.ts'

export type PlannedChangeRow = typeof plannedChanges.$inferSelect

/** A place or a part of it, and items there: what a planned change is about. */
export interface Scope {
  wardId: number | null
  roomId: number | null
  itemIds: number[]
}

/** Changes that were not taken back, by start. */
export async function listStanding(db: Reader): Promise<PlannedChangeRow[]> {
  return db
    .select()
    .from(plannedChanges)
    .where(isNull(plannedChanges.endedAt))
    .orderBy(asc(plannedChanges.startsOn), asc(plannedChanges.id))
}

export async function listChanges(db: Reader, lastDayFrom: string | null): Promise<PlannedChangeRow[]> {
  const open: SQL | undefined =
    lastDayFrom === null
      ? undefined
      : and(isNull(plannedChanges.endedAt), or(isNull(plannedChanges.endsOn), gte(plannedChanges.endsOn, lastDayFrom)))
  return db.select().from(plannedChanges).where(open).orderBy(desc(plannedChanges.startsOn), desc(plannedChanges.id))
}

export async function findChange(db: Reader, id: number): Promise<PlannedChangeRow | null> {
  const [row] = await db.select().from(plannedChanges).where(eq(plannedChanges.id, id))
  return row ?? null
}

export async function insertChange(tx: Tx, row: typeof plannedChanges.$inferInsert): Promise<number> {
  const [made] = await tx.insert(plannedChanges).values(row).$returningId()
  return made!.id
}

export async function updateChange(tx: Tx, id: number, set: Partial<PlannedChangeRow>): Promise<void> {
  if (Object.keys(set).length) await tx.update(plannedChanges).set(set).where(eq(plannedChanges.id, id))
}

const within = (scope: Scope): SQL | undefined =>
  and(
    isNull(bins.retiredAt),
    isNull(bins.overflowOf),
    scope.roomId !== null ? eq(bins.roomId, scope.roomId) : undefined,
    scope.wardId !== null ? eq(rooms.wardId, scope.wardId) : undefined,
    scope.itemIds.length ? inArray(binAssignments.itemId, scope.itemIds) : undefined,
  )

/** Bins in use a change is about, with what they hold. */
export async function listScopeBins(db: Reader, scope: Scope) {
  return db
    .select({ binId: bins.id, itemId: binAssignments.itemId, roomId: bins.roomId, wardId: rooms.wardId })
    .from(bins)
    .innerJoin(rooms, eq(rooms.id, bins.roomId))
    .innerJoin(binAssignments, and(eq(binAssignments.binId, bins.id), isNull(binAssignments.assignedTo)))
    .where(within(scope))
    .orderBy(asc(bins.id))
}

/** Names of a place; null where there is none of that id in use. */
export async function findPlace(db: Reader, scope: Pick<Scope, 'wardId' | 'roomId'>) {
  if (scope.roomId !== null) {
    const [row] = await db
      .select({ name: rooms.name, wardId: rooms.wardId, wardName: wards.name })
      .from(rooms)
      .innerJoin(wards, eq(wards.id, rooms.wardId))
      .where(and(eq(rooms.id, scope.roomId), isNull(rooms.retiredAt)))
    return row ?? null
  }
  const [row] = await db
    .select({ name: wards.name, wardId: wards.id, wardName: wards.name })
    .from(wards)
    .where(and(eq(wards.id, scope.wardId ?? 0), isNull(wards.retiredAt)))
  return row ?? null
}

export async function listItemNames(db: Reader, ids: number[]) {
  if (ids.length === 0) return []
  return db.select({ id: items.id, name: items.name }).from(items).where(inArray(items.id, ids))
}

/** Used intervals of the bins of a scope that lie inside a stretch of time. */
export async function listScopeIntervals(db: Reader, scope: Scope, from: Date, to: Date) {
  return db
    .select({
      binId: demandIntervals.binId,
      openedAt: demandIntervals.openedAt,
      closedAt: demandIntervals.closedAt,
      days: demandIntervals.days,
      exposureDays: demandIntervals.exposureDays,
      quantity: demandIntervals.quantity,
    })
    .from(demandIntervals)
    .innerJoin(bins, eq(bins.id, demandIntervals.binId))
    .innerJoin(rooms, eq(rooms.id, bins.roomId))
    .innerJoin(
      binAssignments,
      and(eq(binAssignments.binId, bins.id), eq(binAssignments.id, demandIntervals.assignmentId)),
    )
    .where(
      and(
        within(scope),
        isNull(binAssignments.assignedTo),
        eq(demandIntervals.isUsed, true),
        gte(demandIntervals.openedAt, from),
        lte(demandIntervals.closedAt, to),
      ),
    )
}
