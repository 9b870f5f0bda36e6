import { date, double, index, int, mysqlTable, unique, varchar } from 'drizzle-orm/mysql-core'
import { id, instant, ref } from '../db/columns.ts'
import type { OrderState } from '#shared/contracts/replenishment.ts'

export const orders = mysqlTable(
  'orders',
  {
    id: id(),
    /** Given once, at sending; a draft has none. */
    number: varchar({ length: 20 }).unique(),
    supplierId: ref().notNull(),
    state: varchar({ length: 20 }).$type<OrderState>().notNull(),
    outsideReference: varchar({ length: 60 }),
    version: int().notNull(),
    createdBy: ref().notNull(),
    createdAt: instant().notNull(),
    sentBy: ref(),
    sentAt: instant(),
    expectedOn: date({ mode: 'string' }),
    acknowledgedAt: instant(),
    closedAt: instant(),
    cancelledAt: instant(),
    cancelReason: varchar({ length: 300 }),
    /** Somebody confirmed a late order still counts as cover. */
    confirmedAt: instant(),
  },
  (t) => [index('orders_state').on(t.state, t.supplierId), index('orders_sent').on(t.sentAt)],
)

/** Numbers of orders: a row per year, locked while one is drawn, so that none is used twice. */
export const orderNumbers = mysqlTable('order_numbers', { year: int().primaryKey(), last: int().notNull() })

export const orderLines = mysqlTable(
  'order_lines',
  {
    id: id(),
    orderId: ref()
      .notNull()
      .references(() => orders.id),
    binId: ref().notNull(),
    assignmentId: ref().notNull(),
    itemId: ref().notNull(),
    packs: int().notNull(),
    packSize: int().notNull(),
    orderUnit: varchar({ length: 30 }).notNull(),
    units: int().notNull(),
    cancelledUnits: int().notNull(),
    price: double(),
  },
  (t) => [unique('order_lines_order_bin').on(t.orderId, t.binId), index('order_lines_bin').on(t.binId)],
)

/** A bin is in at most one draft: two coordinators at once end in one clear answer, not in two orders. */
export const draftBins = mysqlTable('draft_bins', {
  binId: ref().primaryKey(),
  orderId: ref()
    .notNull()
    .references(() => orders.id),
})
