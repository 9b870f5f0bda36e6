import { boolean, date, double, index, int, mysqlTable, primaryKey, varchar } from 'drizzle-orm/mysql-core'
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
    /** What was learnt besides: how counts keep their rhythm, what is asked, who helps; looked at anew each time. */
    facts: jsonOf<unknown>(),
    /** The row whose calculation made the figure in force; null where a person entered it. */
    basisId: ref(),
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
    /** Days beyond the moment the supplier's calendar stated for it; below 0 when it came early. */
    delayDays: double().notNull().default(0),
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
  /** Every place up to this one is done: where a run cut short goes on. */
  lastBinId: ref(),
  changed: int().notNull(),
})

/** Stretches of a place's time that are left out, starts of a history, and answers to what was asked. */
export const exclusions = mysqlTable(
  'exclusions',
  {
    id: id(),
    binId: ref().notNull(),
    assignmentId: ref().notNull(),
    kind: varchar({ length: 20 }).$type<'excluded' | 'history-start' | 'real'>().notNull(),
    fromAt: instant().notNull(),
    toAt: instant(),
    reason: varchar({ length: 300 }).notNull(),
    createdBy: ref().notNull(),
    createdAt: instant().notNull(),
    endedAt: instant(),
    endedBy: ref(),
  },
  (t) => [index('exclusions_bin').on(t.binId, t.endedAt)],
)

/** A change of use that people know of: beds opened, a theatre list, a ward shut. */
export const plannedChanges = mysqlTable(
  'planned_changes',
  {
    id: id(),
    name: varchar({ length: 120 }).notNull(),
    wardId: ref(),
    roomId: ref(),
    /** Items it is about; none is every item there. */
    itemIds: jsonOf<number[]>().notNull(),
    kind: varchar({ length: 10 }).$type<'factor' | 'cases' | 'closed'>().notNull(),
    factor: double(),
    unitsPerCase: double(),
    casesPerDay: double(),
    weekdays: varchar({ length: 7 }).notNull(),
    startsOn: date({ mode: 'string' }).notNull(),
    endsOn: date({ mode: 'string' }),
    reason: varchar({ length: 300 }).notNull(),
    createdBy: ref().notNull(),
    createdAt: instant().notNull(),
    /** Taken back: counts for nothing since then. */
    endedAt: instant(),
    endedBy: ref(),
    /** What the counts said of it at the last night's run. */
    seenFactor: double(),
    seenIntervals: int().notNull().default(0),
    usedFactor: double(),
  },
  (t) => [index('planned_changes_time').on(t.endedAt, t.startsOn)],
)

/** What like wards teach about an item; frozen once a night, so that no result depends on the order of the run. */
export const pools = mysqlTable(
  'pools',
  {
    itemId: ref().notNull(),
    wardKind: varchar({ length: 20 }).notNull(),
    nu0: double().notNull(),
    w0: double().notNull(),
    rateA: double(),
    rateB: double(),
    basis: varchar({ length: 10 }).$type<'item' | 'category'>().notNull(),
    members: jsonOf<unknown>().notNull(),
    madeAt: instant().notNull(),
  },
  (t) => [primaryKey({ columns: [t.itemId, t.wardKind] })],
)

/** A ward a person left out of what helps an item. */
export const poolExclusions = mysqlTable(
  'pool_exclusions',
  {
    id: id(),
    itemId: ref().notNull(),
    wardId: ref().notNull(),
    reason: varchar({ length: 300 }).notNull(),
    createdBy: ref().notNull(),
    createdAt: instant().notNull(),
    endedAt: instant(),
    endedBy: ref(),
  },
  (t) => [index('pool_exclusions_item').on(t.itemId, t.endedAt)],
)

/** How use spreads over the week in a ward; frozen at night and replaced only when it moved. */
export const weekdayProfiles = mysqlTable('weekday_profiles', {
  wardId: ref().primaryKey(),
  weights: jsonOf<number[]>().notNull(),
  intervals: int().notNull(),
  madeAt: instant().notNull(),
})
