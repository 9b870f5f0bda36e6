import { and, asc, eq, isNull } from 'drizzle-orm'
import type { Reader, Tx } from '../db/client.ts'
import { exclusions, poolExclusions } from './policy.tables.ts'

export type ExclusionRow = typeof exclusions.$inferSelect

/** What stands for one bin under its present assignment. */
export async function listExclusions(db: Reader, binId: number, assignmentId: number | null): Promise<ExclusionRow[]> {
  if (assignmentId === null) return []
  return db
    .select()
    .from(exclusions)
    .where(and(eq(exclusions.binId, binId), eq(exclusions.assignmentId, assignmentId), isNull(exclusions.endedAt)))
    .orderBy(asc(exclusions.fromAt), asc(exclusions.id))
}

export async function lockExclusion(tx: Tx, id: number): Promise<ExclusionRow | null> {
  const [row] = await tx.select().from(exclusions).where(eq(exclusions.id, id)).for('update')
  return row ?? null
}

export async function insertExclusion(tx: Tx, row: typeof exclusions.$inferInsert): Promise<number> {
  const [made] = await tx.insert(exclusions).values(row).$returningId()
  return made!.id
}

export async function endExclusion(tx: Tx, id: number, endedBy: number, endedAt: Date): Promise<void> {
  await tx.update(exclusions).set({ endedBy, endedAt }).where(eq(exclusions.id, id))
}

// Like wards ------------------------------------------------------------------------------------------------------
export async function listPoolExclusions(db: Reader) {
  return db.select().from(poolExclusions).where(isNull(poolExclusions.endedAt))
}

export async function insertPoolExclusion(tx: Tx, row: typeof poolExclusions.$inferInsert): Promise<void> {
  await tx.insert(poolExclusions).values(row)
}

export async function endPoolExclusions(
  tx: Tx,
  itemId: number,
  wardId: number,
  endedBy: number,
  endedAt: Date,
): Promise<void> {
  await tx
    .update(poolExclusions)
    .set({ endedBy, endedAt })
    .where(and(eq(poolExclusions.itemId, itemId), eq(poolExclusions.wardId, wardId), isNull(poolExclusions.endedAt)))
}
