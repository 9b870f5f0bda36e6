import { and, asc, desc, eq, gt, inArray, lte, max, notLike, sql } from 'drizzle-orm'
import { auditLog } from '../audit/audit.tables.ts'
import { binAssignments, bins } from '../catalogue/catalogue.tables.ts'
import { binLevels, operations } from '../counts/counts.tables.ts'
import type { Db, Reader, Tx } from '../db/client.ts'
import { jobs } from '../jobs/jobs.tables.ts'
import { users } from '../people/people.tables.ts'
import { draftBins, orderLines, orderNumbers, orders } from '../replenishment/replenishment.tables.ts'
import { exclusions, plannedChanges } from '../policy/policy.tables.ts'
import { pinnedFloors, serviceLevelOverrides } from '../review/review.tables.ts'

/** Statements of the demo hospital's loading that no capability needs one by one. */

export type NewOrder = typeof orders.$inferInsert
export type NewLine = typeof orderLines.$inferInsert

/** Devices of the simulated people; every other device is a real person's. */
export const demoDevices = 'tg-%'

/** Runs `work` while no other start of the same database can. @throws {Error} when another one takes minutes */
export async function alone<T>(db: Db, work: () => Promise<T>): Promise<T> {
  return db.transaction(async (tx) => {
    const [rows] = await tx.execute(sql`SELECT GET_LOCK('brimline-first-data', 300) AS got`)
    const isMine = (rows as unknown as { got: number | null }[])[0]?.got === 1
    if (!isMine) throw new Error('Another start is still loading this database. Try again in a few minutes.')
    try {
      return await work()
    } finally {
      await tx.execute(sql`SELECT RELEASE_LOCK('brimline-first-data')`)
    }
  })
}

/** How far the demo hospital has come, newest first: what its loading wrote into the audit log. */
export async function listMarkers(db: Reader) {
  return db
    .select({ action: auditLog.action, at: auditLog.at, after: auditLog.after })
    .from(auditLog)
    .where(and(eq(auditLog.subject, 'demo'), eq(auditLog.subjectId, '1')))
    .orderBy(desc(auditLog.id))
}

/** When a person last entered something about each place, after a moment. */
export async function listTouched(db: Reader, since: Date): Promise<Map<number, Date>> {
  const rows = await db
    .select({ binId: operations.binId, at: max(operations.receivedAt) })
    .from(operations)
    .where(and(gt(operations.receivedAt, since), notLike(operations.deviceId, demoDevices)))
    .groupBy(operations.binId)
  return new Map(rows.flatMap((r) => (r.binId === null || r.at === null ? [] : [[r.binId, r.at] as const])))
}

/** Which of these entries are in the record already. */
export async function listKnown(db: Reader, opIds: readonly string[]): Promise<Set<string>> {
  if (opIds.length === 0) return new Set()
  const rows = await db
    .select({ opId: operations.opId })
    .from(operations)
    .where(inArray(operations.opId, [...opIds]))
  return new Set(rows.map((r) => r.opId))
}

export type NewBin = typeof bins.$inferInsert
export type NewAssignment = Omit<typeof binAssignments.$inferInsert, 'binId'>

/**
 * Places with what they hold and their level rows, as `createBin` leaves each of them. @returns their ids by code
 */
export async function insertBins(
  tx: Tx,
  rows: { bin: NewBin; assignment: NewAssignment }[],
): Promise<Map<string, number>> {
  await tx.insert(bins).values(rows.map((r) => r.bin))
  const codes = rows.map((r) => r.bin.code)
  const made = await tx.select({ id: bins.id, code: bins.code }).from(bins).where(inArray(bins.code, codes))
  const ids = new Map(made.map((r) => [r.code, r.id]))
  await tx.insert(binAssignments).values(rows.map((r) => ({ ...r.assignment, binId: ids.get(r.bin.code)! })))
  const held = await tx
    .select({ id: binAssignments.id, binId: binAssignments.binId })
    .from(binAssignments)
    .where(inArray(binAssignments.binId, [...ids.values()]))
  const assignments = new Map(held.map((a) => [a.binId, a.id]))
  await tx.insert(binLevels).values(
    rows.map(({ bin, assignment }) => {
      const binId = ids.get(bin.code)!
      const foldedAt = assignment.assignedFrom
      return {
        binId,
        roomId: bin.roomId,
        assignmentId: assignments.get(binId)!,
        onHand: 0,
        held: 0,
        roomVersion: 0,
        foldedAt,
      }
    }),
  )
  return ids
}

export async function listStaff(db: Reader) {
  return db
    .select({ id: users.id, staffCode: users.staffCode, role: users.role, passwordHash: users.passwordHash })
    .from(users)
    .orderBy(asc(users.id))
}

/** Writes orders and gives their ids, in the order of the rows. */
export async function insertOrders(tx: Tx, rows: NewOrder[]): Promise<number[]> {
  const [before] = await tx.select({ id: max(orders.id) }).from(orders)
  for (let i = 0; i < rows.length; i += 500) await tx.insert(orders).values(rows.slice(i, i + 500))
  const made = await tx
    .select({ id: orders.id })
    .from(orders)
    .where(gt(orders.id, before?.id ?? 0))
    .orderBy(asc(orders.id))
  return made.map((r) => r.id)
}

export async function insertOrderLines(tx: Tx, rows: NewLine[]): Promise<void> {
  for (let i = 0; i < rows.length; i += 500) await tx.insert(orderLines).values(rows.slice(i, i + 500))
}

/** Lines of the orders that were sent at or after a moment, by order number and place. */
export async function listSentLines(db: Reader, since: Date) {
  return db
    .select({ id: orderLines.id, binId: orderLines.binId, number: orders.number })
    .from(orderLines)
    .innerJoin(orders, eq(orders.id, orderLines.orderId))
    .where(gt(orders.sentAt, since))
}

/** The last number given in a year, locked; 0 before the first. */
export async function lockLastNumber(tx: Tx, year: number): Promise<number> {
  await tx.insert(orderNumbers).values({ year, last: 0 }).onDuplicateKeyUpdate({ set: { year } })
  const [row] = await tx.select().from(orderNumbers).where(eq(orderNumbers.year, year)).for('update')
  return row?.last ?? 0
}

export async function setLastNumber(tx: Tx, year: number, last: number): Promise<void> {
  await tx.update(orderNumbers).set({ last }).where(eq(orderNumbers.year, year))
}

export async function binsInDrafts(db: Reader): Promise<Set<number>> {
  return new Set((await db.select({ binId: draftBins.binId }).from(draftBins)).map((r) => r.binId))
}

export async function insertOverride(tx: Tx, row: typeof serviceLevelOverrides.$inferInsert): Promise<void> {
  await tx.insert(serviceLevelOverrides).values(row)
}

export async function insertFloor(tx: Tx, row: typeof pinnedFloors.$inferInsert): Promise<void> {
  await tx.insert(pinnedFloors).values(row)
}

/** Looks at single policies are not needed any more once all of them were looked at. */
export async function dropPolicyJobs(db: Db, until: Date): Promise<void> {
  await db.delete(jobs).where(and(eq(jobs.kind, 'policy-bin'), lte(jobs.createdAt, until)))
}

// Decisions -------------------------------------------------------------------------------------------------------
export async function insertHistoryStart(
  tx: Tx,
  row: Omit<typeof exclusions.$inferInsert, 'kind' | 'toAt'>,
): Promise<void> {
  await tx.insert(exclusions).values({ ...row, kind: 'history-start', toAt: null })
}

export async function insertPlannedChange(tx: Tx, row: typeof plannedChanges.$inferInsert): Promise<number> {
  const [made] = await tx.insert(plannedChanges).values(row).$returningId()
  return made!.id
}
