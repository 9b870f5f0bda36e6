import { and, asc, desc, eq, gt, gte, inArray, isNull, lte, max, sql, type SQL } from 'drizzle-orm'
import { bins, items, supplyAgreements, suppliers } from '../catalogue/catalogue.tables.ts'
import type { Db, Reader, Tx } from '../db/client.ts'
import { demandIntervals, leadTimeObservations, policies, policyRuns } from './policy.tables.ts'

/** Of one supplier; older ones tell of another time. */
const delaysKept = 300

export type PolicyRow = typeof policies.$inferSelect
export type IntervalRow = typeof demandIntervals.$inferSelect
export type NewInterval = Omit<IntervalRow, 'id'>

export async function findCurrent(db: Reader, binId: number): Promise<PolicyRow | null> {
  const [row] = await db
    .select()
    .from(policies)
    .where(and(eq(policies.binId, binId), eq(policies.isCurrent, true)))
  return row ?? null
}

export async function listCurrent(db: Reader): Promise<PolicyRow[]> {
  return db.select().from(policies).where(eq(policies.isCurrent, true)).orderBy(asc(policies.binId))
}

/** What stands worked out of some bins, for a run that works out only what changed. */
export async function listWorkedOut(db: Reader, binIds: number[]) {
  if (binIds.length === 0) return []
  return db
    .select({ id: policies.id, input: policies.input, result: policies.result })
    .from(policies)
    .where(and(eq(policies.isCurrent, true), inArray(policies.binId, binIds)))
}

/** Results alone: the inputs they were made from are many times larger. */
export async function listResults(db: Reader) {
  return db
    .select({ binId: policies.binId, result: policies.result })
    .from(policies)
    .where(eq(policies.isCurrent, true))
}

/** Bins with open questions about their use. */
export async function listAsked(db: Reader) {
  const questions = sql<number>`coalesce(json_length(${policies.facts}, '$.questions'), 0)`.mapWith(Number)
  return db
    .select({ binId: policies.binId, questions })
    .from(policies)
    .where(and(eq(policies.isCurrent, true), gt(questions, 0)))
}

/** What the figures in force of each bin come to. */
export async function listFigures(db: Reader) {
  const figure = (table: SQL) => sql<number | null>`${table}`.mapWith(Number)
  return db
    .select({
      binId: policies.binId,
      orderQuantity: policies.orderQuantity,
      sure: figure(sql`json_value(${policies.facts}, '$.sure')`),
      meanPerDay: figure(sql`json_value(${policies.result}, '$.demand.meanPerDay')`),
      reviewPeriodDays: figure(sql`json_value(${policies.result}, '$.reviewPeriodDays')`),
    })
    .from(policies)
    .where(eq(policies.isCurrent, true))
}

export async function insertPolicy(tx: Tx, row: typeof policies.$inferInsert): Promise<number> {
  await tx
    .update(policies)
    .set({ isCurrent: false })
    .where(and(eq(policies.binId, row.binId), eq(policies.isCurrent, true)))
  const [made] = await tx.insert(policies).values(row).$returningId()
  return made!.id
}

/** What a row was computed from, and what was learnt beside it. */
export async function findBasis(db: Reader, id: number) {
  const [row] = await db
    .select({ input: policies.input, facts: policies.facts })
    .from(policies)
    .where(eq(policies.id, id))
  return row ?? null
}

export async function updatePolicy(tx: Tx, id: number, set: Partial<PolicyRow>): Promise<void> {
  await tx.update(policies).set(set).where(eq(policies.id, id))
}

export async function retirePolicies(tx: Tx, binId: number): Promise<void> {
  await tx
    .update(policies)
    .set({ isCurrent: false })
    .where(and(eq(policies.binId, binId), eq(policies.isCurrent, true)))
}

/** How the figures in force moved, newest first. */
export async function listHistory(db: Reader, binId: number, limit: number) {
  return db
    .select({
      id: policies.id,
      reorderPoint: policies.reorderPoint,
      parLevel: policies.parLevel,
      target: policies.target,
      targetSource: policies.targetSource,
      method: policies.method,
      mode: policies.mode,
      cause: policies.cause,
      moved: sql<unknown>`json_extract(${policies.facts}, '$.moved')`,
      inForceSince: policies.inForceSince,
      createdAt: policies.createdAt,
    })
    .from(policies)
    .where(eq(policies.binId, binId))
    .orderBy(desc(policies.createdAt), desc(policies.id))
    .limit(limit)
}

/** Rows written since a moment, with the figure each replaced; oldest first. */
export async function listMovedSince(db: Reader, since: Date) {
  return db
    .select({
      id: policies.id,
      binId: policies.binId,
      reorderPoint: policies.reorderPoint,
      cause: policies.cause,
      at: policies.inForceSince,
      createdAt: policies.createdAt,
    })
    .from(policies)
    .where(gt(policies.createdAt, since))
    .orderBy(asc(policies.createdAt), asc(policies.id))
}

/** The figure in force at a moment, per bin: that of the newest row written by then. */
export async function listPointsBefore(db: Reader, binIds: number[], before: Date) {
  if (binIds.length === 0) return []
  const newest = await db
    .select({ id: max(policies.id) })
    .from(policies)
    .where(and(inArray(policies.binId, binIds), lte(policies.createdAt, before)))
    .groupBy(policies.binId)
  const ids = newest.flatMap((row) => (row.id === null ? [] : [row.id]))
  if (ids.length === 0) return []
  return db
    .select({ binId: policies.binId, reorderPoint: policies.reorderPoint })
    .from(policies)
    .where(inArray(policies.id, ids))
}

// Intervals -------------------------------------------------------------------------------------------------------
export async function listIntervals(db: Reader, binId: number): Promise<IntervalRow[]> {
  return db
    .select()
    .from(demandIntervals)
    .where(eq(demandIntervals.binId, binId))
    .orderBy(asc(demandIntervals.closedAt), asc(demandIntervals.id))
}

export async function replaceIntervals(tx: Tx, stale: number[], fresh: NewInterval[]): Promise<void> {
  if (stale.length) await tx.delete(demandIntervals).where(inArray(demandIntervals.id, stale))
  for (let i = 0; i < fresh.length; i += 500) await tx.insert(demandIntervals).values(fresh.slice(i, i + 500))
}

/** Per bin: intervals, their days, and how many closed on an empty shelf. */
export async function countIntervals(db: Reader, binIds: number[]) {
  if (binIds.length === 0) return []
  return db
    .select({
      binId: demandIntervals.binId,
      intervals: sql<number>`count(*)`.mapWith(Number),
      days: sql<number>`coalesce(sum(${demandIntervals.days}), 0)`.mapWith(Number),
      foundEmpty: sql<number>`coalesce(sum(${demandIntervals.isCensored}), 0)`.mapWith(Number),
    })
    .from(demandIntervals)
    .where(inArray(demandIntervals.binId, binIds))
    .groupBy(demandIntervals.binId)
}

/**
 * Per bin under its present assignment: delivery cycles on record (one per put-away) and those in which a count found
 * the shelf empty. Entries taken back are left out.
 */
export async function countCycles(
  db: Reader,
  binIds: number[],
): Promise<{ binId: number; cycles: number; found: number }[]> {
  if (binIds.length === 0) return []
  const [rows] = (await db.execute(sql`
    SELECT bin_id AS binId, MAX(cycle) AS cycles, COUNT(DISTINCT IF(type = 'count' AND quantity = 0, cycle, NULL)) AS found
    FROM (
      SELECT m.bin_id, m.type, m.quantity,
        SUM(m.type = 'receipt') OVER (PARTITION BY m.bin_id ORDER BY m.effective_at, m.id) AS cycle
      FROM movements m
      JOIN bin_levels l ON l.bin_id = m.bin_id AND l.assignment_id = m.assignment_id
      LEFT JOIN movements w ON w.target_op_id = m.op_id AND w.type = 'withdraw'
      WHERE m.type IN ('count', 'receipt') AND w.id IS NULL AND m.bin_id IN ${binIds}
    ) standing
    GROUP BY bin_id`)) as unknown as [{ binId: number; cycles: string; found: string }[]]
  return rows.map((r) => ({ binId: Number(r.binId), cycles: Number(r.cycles), found: Number(r.found) }))
}

// Supply ----------------------------------------------------------------------------------------------------------
/** What a policy needs of the item and its first supplier. */
export async function listSupply(db: Reader, itemIds: number[]) {
  if (itemIds.length === 0) return []
  return db
    .select({
      itemId: items.id,
      shelfLifeDays: items.shelfLifeDays,
      price: supplyAgreements.price,
      supplier: suppliers,
    })
    .from(items)
    .leftJoin(supplyAgreements, and(eq(supplyAgreements.itemId, items.id), eq(supplyAgreements.isPreferred, true)))
    .leftJoin(suppliers, eq(suppliers.id, supplyAgreements.supplierId))
    .where(inArray(items.id, itemIds))
}
export type SupplyRow = Awaited<ReturnType<typeof listSupply>>[number]

/** How late deliveries of a supplier came against the stated moment, newest first. */
export async function listDelays(db: Reader, supplierId: number) {
  return db
    .select({ itemId: leadTimeObservations.itemId, delayDays: leadTimeObservations.delayDays })
    .from(leadTimeObservations)
    .where(eq(leadTimeObservations.supplierId, supplierId))
    .orderBy(desc(leadTimeObservations.arrivedAt), desc(leadTimeObservations.id))
    .limit(delaysKept)
}

/** Bins in use, by id: the order of a run. */
export async function listLiveBins(db: Reader): Promise<number[]> {
  const rows = await db.select({ id: bins.id }).from(bins).where(isNull(bins.retiredAt)).orderBy(asc(bins.id))
  return rows.map((row) => row.id)
}

// Runs ------------------------------------------------------------------------------------------------------------
export async function insertRun(db: Db, row: typeof policyRuns.$inferInsert): Promise<number> {
  const [made] = await db.insert(policyRuns).values(row).$returningId()
  return made!.id
}

export async function updateRun(db: Db, id: number, set: Partial<typeof policyRuns.$inferInsert>): Promise<void> {
  await db.update(policyRuns).set(set).where(eq(policyRuns.id, id))
}

/** A run that began since a moment and has not ended. */
export async function findOpenRun(db: Reader, cause: string, since: Date) {
  const [row] = await db
    .select()
    .from(policyRuns)
    .where(and(eq(policyRuns.cause, cause), gte(policyRuns.startedAt, since), isNull(policyRuns.finishedAt)))
    .orderBy(desc(policyRuns.startedAt), desc(policyRuns.id))
    .limit(1)
  return row ?? null
}

export async function newestRun(db: Reader, cause: string | null) {
  const [row] = await db
    .select()
    .from(policyRuns)
    .where(cause === null ? undefined : eq(policyRuns.cause, cause))
    .orderBy(desc(policyRuns.startedAt))
    .limit(1)
  return row ?? null
}
