import { date, double, index, int, mysqlTable, varchar } from 'drizzle-orm/mysql-core'
import { id, instant, ref } from '../db/columns.ts'
import type { Ved } from '#shared/contracts/catalogue.ts'

export const serviceLevelClasses = mysqlTable('service_level_classes', {
  ved: varchar({ length: 1 }).$type<Ved>().primaryKey(),
  level: double().notNull(),
})

/** A judged exception: dated, reasoned, reversible. Ended ones are kept. */
export const serviceLevelOverrides = mysqlTable(
  'service_level_overrides',
  {
    id: id(),
    binId: ref(),
    itemId: ref(),
    level: double().notNull(),
    reason: varchar({ length: 500 }).notNull(),
    policyReference: varchar({ length: 120 }).notNull(),
    reviewBy: date({ mode: 'string' }).notNull(),
    state: varchar({ length: 12 }).$type<'proposed' | 'in-force' | 'ended' | 'declined'>().notNull(),
    proposedBy: ref().notNull(),
    proposedAt: instant().notNull(),
    decidedBy: ref(),
    decidedAt: instant(),
    endedBy: ref(),
    endedAt: instant(),
  },
  (t) => [
    index('service_level_overrides_bin').on(t.binId, t.state),
    index('service_level_overrides_item').on(t.itemId, t.state),
  ],
)

export const pinnedFloors = mysqlTable(
  'pinned_floors',
  {
    id: id(),
    binId: ref().notNull(),
    floor: int().notNull(),
    reason: varchar({ length: 300 }).notNull(),
    setBy: ref().notNull(),
    setAt: instant().notNull(),
    endedAt: instant(),
  },
  (t) => [index('pinned_floors_bin').on(t.binId, t.endedAt)],
)
