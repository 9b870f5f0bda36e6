import { and, desc, eq, inArray, isNull, or } from 'drizzle-orm'
import type { Reader, Tx } from '../db/client.ts'
import { pinnedFloors, serviceLevelOverrides } from './review.tables.ts'

export type OverrideRow = typeof serviceLevelOverrides.$inferSelect
export type FloorRow = typeof pinnedFloors.$inferSelect

/** Overrides and proposals that touch these bins or items. */
export async function listOverrides(
  db: Reader,
  binIds: number[],
  itemIds: number[],
  states: OverrideRow['state'][],
): Promise<OverrideRow[]> {
  const parts = [
    binIds.length ? inArray(serviceLevelOverrides.binId, binIds) : undefined,
    itemIds.length ? inArray(serviceLevelOverrides.itemId, itemIds) : undefined,
  ].filter((p) => p !== undefined)
  if (parts.length === 0) return []
  return db
    .select()
    .from(serviceLevelOverrides)
    .where(and(inArray(serviceLevelOverrides.state, states), or(...parts)))
    .orderBy(desc(serviceLevelOverrides.id))
}

export async function lockOverride(tx: Tx, id: number): Promise<OverrideRow | null> {
  const [row] = await tx.select().from(serviceLevelOverrides).where(eq(serviceLevelOverrides.id, id)).for('update')
  return row ?? null
}

export async function insertOverride(tx: Tx, row: typeof serviceLevelOverrides.$inferInsert): Promise<number> {
  const [made] = await tx.insert(serviceLevelOverrides).values(row).$returningId()
  return made!.id
}

export async function updateOverride(tx: Tx, id: number, set: Partial<OverrideRow>): Promise<void> {
  await tx.update(serviceLevelOverrides).set(set).where(eq(serviceLevelOverrides.id, id))
}

/** Ends what is in force for a bin; ended ones are kept. @returns how many were ended */
export async function endOverridesOfBin(tx: Tx, binId: number, by: number, at: Date): Promise<number> {
  const [done] = await tx
    .update(serviceLevelOverrides)
    .set({ state: 'ended', endedBy: by, endedAt: at })
    .where(and(eq(serviceLevelOverrides.binId, binId), eq(serviceLevelOverrides.state, 'in-force')))
  return done.affectedRows
}

/** A newer proposal takes the place of an undecided one. */
export async function declineProposalsOfBin(tx: Tx, binId: number, by: number, at: Date): Promise<void> {
  await tx
    .update(serviceLevelOverrides)
    .set({ state: 'declined', decidedBy: by, decidedAt: at })
    .where(and(eq(serviceLevelOverrides.binId, binId), eq(serviceLevelOverrides.state, 'proposed')))
}

export async function listFloors(db: Reader, binIds: number[]): Promise<FloorRow[]> {
  if (binIds.length === 0) return []
  return db
    .select()
    .from(pinnedFloors)
    .where(and(inArray(pinnedFloors.binId, binIds), isNull(pinnedFloors.endedAt)))
}

export async function endFloor(tx: Tx, binId: number, at: Date): Promise<void> {
  await tx
    .update(pinnedFloors)
    .set({ endedAt: at })
    .where(and(eq(pinnedFloors.binId, binId), isNull(pinnedFloors.endedAt)))
}

export async function insertFloor(tx: Tx, row: typeof pinnedFloors.$inferInsert): Promise<void> {
  await tx.insert(pinnedFloors).values(row)
}
