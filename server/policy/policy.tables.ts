import { boolean, double, index, int, mysqlTable, varchar } from 'drizzle-orm/mysql-core'
import { id, instant, jsonOf, ref } from '../db/columns.ts'

/** Projection of the ledger: one row per pair of neighbouring counts inside one assignment. */
export const demandIntervals = mysqlTable(
  'demand_intervals',
  {
    id: id(),
    binId: ref().notNull(),
    assignmentId: ref().notNull(),
    openingOpId: varchar({ length: 36 }).notNull(),
    closingOpId: varchar({ length: 36 }).notNull(),
    openedAt: instant().notNull(),
    closedAt: instant().notNull(),
    days: double().notNull(),
    exposureDays: double().notNull(),
    quantity: int().notNull(),
    isCensored: boolean().notNull(),
    isUsed: boolean().notNull(),
    why: varchar({ length: 40 }),
  },
  (t) => [index('demand_intervals_bin').on(t.binId, t.closedAt)],
)

/** A calculation with everything it was made from, and the figures in force. The newest row of a bin counts. */
export const policies = mysqlTable(
  'policies',
  {
    id: id(),
    binId: ref().notNull(),
    assignmentId: ref().notNull(),
    isCurrent: boolean().notNull(),
    mode: varchar({ length: 20 }).$type<'as-before' | 'beside' | 'calculated'>().notNull(),
    method: varchar({ length: 40 }).notNull(),
    target: double().notNull(),
    targetSource: varchar({ length: 20 }).$type<'bin-override' | 'item-override' | 'class' | 'hospital'>().notNull(),
    /** PolicyInput as computed with; null where nothing could be computed. */
    input: jsonOf<unknown>(),
    result: jsonOf<unknown>(),
    protection: jsonOf<unknown>(),
    pending: jsonOf<unknown>(),
    reorderPoint: int(),
    parLevel: int(),
    orderQuantity: int(),
    /** What made this row: `count`, `service-level`, `calendar`, `rhythm`, `mode`, `entered`, `nightly`. */
    cause: varchar({ length: 30 }).notNull(),
    /** Counts in a row whose calculation stood below the figure in force. */
    lowerCounts: int().notNull(),
    lastCountOpId: varchar({ length: 36 }),
    asOf: instant().notNull(),
    inForceSince: instant().notNull(),
    createdAt: instant().notNull(),
    confirmedAt: instant().notNull(),
  },
  (t) => [index('policies_bin').on(t.binId, t.isCurrent), index('policies_changed').on(t.inForceSince)],
)

/** One per order line that came: from sending to the put-away by which nine tenths were there. */
export const leadTimeObservations = mysqlTable(
  'lead_time_observations',
  {
    id: id(),
    supplierId: ref().notNull(),
    itemId: ref().notNull(),
    orderLineId: ref().notNull().unique(),
    orderedAt: instant().notNull(),
    arrivedAt: instant().notNull(),
    days: double().notNull(),
  },
  (t) => [index('lead_time_observations_supplier').on(t.supplierId, t.arrivedAt)],
)

export const policyRuns = mysqlTable('policy_runs', {
  id: id(),
  startedAt: instant().notNull(),
  finishedAt: instant(),
  cause: varchar({ length: 20 }).notNull(),
  bins: int().notNull(),
  done: int().notNull(),
  lastBinId: ref(),
  changed: int().notNull(),
})
