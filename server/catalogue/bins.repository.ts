import { and, eq, isNull, max } from 'drizzle-orm'
import type { Reader, Tx } from '../db/client.ts'
import { binAssignments, bins } from './catalogue.tables.ts'

export type BinRecord = typeof bins.$inferSelect
export type AssignmentRecord = typeof binAssignments.$inferSelect

export async function lockBin(tx: Tx, id: number): Promise<BinRecord | null> {
  const [row] = await tx.select().from(bins).where(eq(bins.id, id)).for('update')
  return row ?? null
}

export async function findBinRecord(db: Reader, id: number): Promise<BinRecord | null> {
  const [row] = await db.select().from(bins).where(eq(bins.id, id))
  return row ?? null
}

export async function codeTaken(db: Reader, code: string): Promise<boolean> {
  const [row] = await db.select({ id: bins.id }).from(bins).where(eq(bins.code, code))
  return row !== undefined
}

export async function insertBin(tx: Tx, row: typeof bins.$inferInsert): Promise<number> {
  const [made] = await tx.insert(bins).values(row).$returningId()
  return made!.id
}

export async function updateBinRow(tx: Tx, id: number, set: Partial<typeof bins.$inferInsert>): Promise<void> {
  if (Object.keys(set).length) await tx.update(bins).set(set).where(eq(bins.id, id))
}

export async function lastWalkOrder(db: Reader, roomId: number): Promise<number> {
  const [row] = await db
    .select({ at: max(bins.walkOrder) })
    .from(bins)
    .where(eq(bins.roomId, roomId))
  return row?.at ?? 0
}

export async function findAssignment(db: Reader, binId: number): Promise<AssignmentRecord | null> {
  const [row] = await db
    .select()
    .from(binAssignments)
    .where(and(eq(binAssignments.binId, binId), isNull(binAssignments.assignedTo)))
  return row ?? null
}

export async function endAssignment(tx: Tx, id: number, at: Date): Promise<void> {
  await tx.update(binAssignments).set({ assignedTo: at }).where(eq(binAssignments.id, id))
}

export async function insertAssignment(tx: Tx, row: typeof binAssignments.$inferInsert): Promise<number> {
  const [made] = await tx.insert(binAssignments).values(row).$returningId()
  return made!.id
}

export async function updateAssignment(tx: Tx, id: number, set: Partial<AssignmentRecord>): Promise<void> {
  if (Object.keys(set).length) await tx.update(binAssignments).set(set).where(eq(binAssignments.id, id))
}

export async function liveOverflowOf(db: Reader, binId: number): Promise<number[]> {
  const rows = await db
    .select({ id: bins.id })
    .from(bins)
    .where(and(eq(bins.overflowOf, binId), isNull(bins.retiredAt)))
  return rows.map((r) => r.id)
}
